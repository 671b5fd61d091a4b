import { peopleEndpoints } from '#shared/schemas/people'
import { signIn, studiosOf } from '../../services/people'

export default defineRoute(peopleEndpoints.login, async ({ event, body }) => {
  await countAttempt(event, 'login', body.email.trim().toLowerCase())
  const { sessionId, user } = await signIn(body)
  await keepSession(event, sessionId)
  return { user, studios: await studiosOf(user.id) }
})
