import { classEndpoints } from '#shared/schemas/classes'
import { takeBack } from '../../../../../services/hand-ins'

export default defineRoute(classEndpoints.takeBack, ({ studio, idParam }) => takeBack(studio, idParam('negative')))
