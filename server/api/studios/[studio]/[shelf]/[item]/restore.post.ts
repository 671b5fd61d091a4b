import { shelfEndpoints } from '#shared/schemas/shelf'
import { restoreShelfItem } from '../../../../../services/shelf'

export default defineRoute(shelfEndpoints.restoreShelfItem, ({ event, studio, body, idParam }) => restoreShelfItem(studio, shelfParam(event), idParam('item'), body.revision))
