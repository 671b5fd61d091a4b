import { wedgeEndpoints } from '#shared/schemas/wedges'
import { wedgeOf } from '../../../../../services/wedges'

export default defineRoute(wedgeEndpoints.wedge, ({ studio, idParam }) => wedgeOf(studio, idParam('wedge')))
