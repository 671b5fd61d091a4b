import { wedgeEndpoints } from '#shared/schemas/wedges'
import { listWedgePrints } from '../../../../../../services/wedge-prints'

export default defineRoute(wedgeEndpoints.listWedgePrints, ({ studio, query, idParam }) => listWedgePrints(studio, idParam('wedge'), query))
