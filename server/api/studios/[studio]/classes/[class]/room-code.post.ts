import { classEndpoints } from '#shared/schemas/classes'
import { renewRoomCode } from '../../../../../services/classes'

export default defineRoute(classEndpoints.renewRoomCode, ({ studio, idParam }) => renewRoomCode(studio, idParam('class')))
