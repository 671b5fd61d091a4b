import { tabletEndpoints } from '#shared/schemas/calibration'
import { listTablets } from '../../../../../../services/tablets'

export default defineRoute(tabletEndpoints.listTablets, ({ studio, query, idParam }) => listTablets(studio, idParam('bench'), query))
