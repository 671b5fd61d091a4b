import { peopleEndpoints } from '#shared/schemas/people'
import { requestReset } from '../../services/accounts'

export default defineRoute(peopleEndpoints.requestReset, async ({ event, body }) => {
  await countAttempt(event, 'reset', body.email.trim().toLowerCase())
  // Not waited for: the time of the answer must not tell whether there is such an account.
  event.waitUntil(requestReset(body.email))
  setResponseStatus(event, 202)
})
