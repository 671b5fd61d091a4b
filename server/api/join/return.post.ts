import { classEndpoints } from '#shared/schemas/classes'
import { returnToClass } from '../../services/joining'
import { studiosOf } from '../../services/people'

export default defineRoute(classEndpoints.returnToClass, async ({ event, body }) => {
  await countAttempt(event, 'return', body.personalCode)
  const { sessionId, user } = await returnToClass(body.personalCode)
  await keepSession(event, sessionId)
  return { user, studios: await studiosOf(user.id) }
})
