import { classEndpoints } from '#shared/schemas/classes'
import { classBoard } from '../../../../../services/class-board'

export default defineRoute(classEndpoints.classBoard, ({ studio, idParam }) => classBoard(studio, idParam('class')))
