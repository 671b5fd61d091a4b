import { accountEndpoints } from '#shared/schemas/account'
import { signInAgain } from '../../services/accounts'

export default defineRoute(accountEndpoints.signInAgain, async ({ event, person, body }) => {
  await countAttempt(event, 'password', person.id)
  await signInAgain(person.id, person.session.id, body.password)
  setResponseStatus(event, 204)
})
