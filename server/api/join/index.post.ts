import { classEndpoints } from '#shared/schemas/classes'
import { joinClass } from '../../services/joining'

export default defineRoute(classEndpoints.joinClass, async ({ event, body }) => {
  await countAttempt(event, 'room', body.roomCode)
  const { sessionId, ...joined } = await joinClass(body)
  await keepSession(event, sessionId)
  setResponseStatus(event, 201)
  return joined
})
