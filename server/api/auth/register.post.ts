import { peopleEndpoints } from '#shared/schemas/people'
import { register } from '../../services/people'

export default defineRoute(peopleEndpoints.register, async ({ event, body }) => {
  await countAttempt(event, 'register')
  const { sessionId, user, studio } = await register(body)
  await keepSession(event, sessionId)
  setResponseStatus(event, 201)
  return { user, studio }
})
