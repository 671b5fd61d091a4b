import { shelfEndpoints } from '#shared/schemas/shelf'
import { listShelf } from '../../../../services/shelf'

export default defineRoute(shelfEndpoints.listShelf, ({ event, studio, query }) => listShelf(studio, shelfParam(event), query))
