import { classEndpoints } from '#shared/schemas/classes'
import { changeClass } from '../../../../../services/classes'

export default defineRoute(classEndpoints.changeClass, ({ studio, idParam, body }) => changeClass(studio, idParam('class'), body))
