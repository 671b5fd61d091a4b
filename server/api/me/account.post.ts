import { classEndpoints } from '#shared/schemas/classes'
import { becomeAccount } from '../../services/accounts'

export default defineRoute(classEndpoints.becomeAccount, async ({ event, person, body }) => {
  await countAttempt(event, 'account', person.id)
  await becomeAccount(person, body)
  setResponseStatus(event, 202)
})
