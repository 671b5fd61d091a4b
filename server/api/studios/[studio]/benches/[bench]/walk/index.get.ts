import { walkEndpoints } from '#shared/schemas/calibration'
import { walkOf } from '../../../../../../services/walk'

export default defineRoute(walkEndpoints.walk, ({ studio, idParam }) => walkOf(studio, idParam('bench')))
