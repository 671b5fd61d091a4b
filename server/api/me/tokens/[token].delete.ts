import { accountEndpoints } from '#shared/schemas/account'
import { revokeToken } from '../../../services/tokens'

export default defineRoute(accountEndpoints.revokeToken, async ({ event, person, idParam }) => {
  await revokeToken(person.id, idParam('token'))
  setResponseStatus(event, 204)
})
