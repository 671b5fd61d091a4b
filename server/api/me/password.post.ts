import { accountEndpoints } from '#shared/schemas/account'
import { changePassword } from '../../services/accounts'

export default defineRoute(accountEndpoints.changePassword, async ({ event, person, body }) => {
  await changePassword(person, person.session.id, body.password)
  setResponseStatus(event, 204)
})
