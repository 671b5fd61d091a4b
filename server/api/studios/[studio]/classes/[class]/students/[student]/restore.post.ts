import { classEndpoints } from '#shared/schemas/classes'
import { restoreStudent } from '../../../../../../../services/class-students'

export default defineRoute(classEndpoints.restoreStudent, async ({ event, studio, idParam }) => {
  await restoreStudent(studio, { classId: idParam('class'), studentId: idParam('student') })
  setResponseStatus(event, 204)
})
