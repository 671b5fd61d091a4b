import { classEndpoints } from '#shared/schemas/classes'
import { lookAtClass } from '../../services/joining'

export default defineRoute(classEndpoints.lookAtClass, async ({ event, body }) => {
  await countAttempt(event, 'room', body.roomCode)
  return await lookAtClass(body.roomCode)
})
