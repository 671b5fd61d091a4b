import { accountEndpoints } from '#shared/schemas/account'
import { createToken } from '../../../services/tokens'

export default defineRoute(accountEndpoints.createToken, async ({ event, person, body }) => {
  setResponseStatus(event, 201)
  return await createToken(person.id, body)
})
