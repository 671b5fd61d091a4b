import { peopleEndpoints } from '#shared/schemas/people'
import { resetPassword } from '../../services/accounts'
import { studiosOf } from '../../services/people'

export default defineRoute(peopleEndpoints.resetPassword, async ({ event, body }) => {
  await countAttempt(event, 'link')
  const { sessionId, user } = await resetPassword(body.token, body.password)
  await keepSession(event, sessionId)
  return { user, studios: await studiosOf(user.id) }
})
