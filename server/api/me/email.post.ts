import { accountEndpoints } from '#shared/schemas/account'
import { requestEmailChange } from '../../services/accounts'

export default defineRoute(accountEndpoints.requestEmailChange, async ({ event, person, body }) => {
  await countAttempt(event, 'letters', person.id)
  await requestEmailChange(person, body.email)
  setResponseStatus(event, 202)
})
