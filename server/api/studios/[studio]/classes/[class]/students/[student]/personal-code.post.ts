import { classEndpoints } from '#shared/schemas/classes'
import { renewPersonalCode } from '../../../../../../../services/class-students'

export default defineRoute(classEndpoints.renewPersonalCode, async ({ event, studio, idParam }) => {
  const personalCode = await renewPersonalCode(studio, { classId: idParam('class'), studentId: idParam('student') })
  setResponseStatus(event, 201)
  return { personalCode }
})
