import { classEndpoints } from '#shared/schemas/classes'
import { removeStudent } from '../../../../../../../services/class-students'

export default defineRoute(classEndpoints.removeStudent, async ({ event, studio, idParam }) => {
  await removeStudent(studio, { classId: idParam('class'), studentId: idParam('student') })
  setResponseStatus(event, 204)
})
