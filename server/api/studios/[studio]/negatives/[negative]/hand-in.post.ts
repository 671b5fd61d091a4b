import { classEndpoints } from '#shared/schemas/classes'
import { handIn } from '../../../../../services/hand-ins'

export default defineRoute(classEndpoints.handIn, ({ studio, idParam }) => handIn(studio, idParam('negative')))
