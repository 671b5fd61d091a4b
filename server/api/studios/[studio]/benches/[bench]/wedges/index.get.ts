import { wedgeEndpoints } from '#shared/schemas/wedges'
import { listWedges } from '../../../../../../services/wedges'

export default defineRoute(wedgeEndpoints.listWedges, ({ studio, query, idParam }) => listWedges(studio, idParam('bench'), query))
