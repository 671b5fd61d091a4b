import { accountEndpoints } from '#shared/schemas/account'
import { keepAccount } from '../../services/erasure'

export default defineRoute(accountEndpoints.keepMe, async ({ event, person }) => {
  await keepAccount(person.id)
  setResponseStatus(event, 204)
})
