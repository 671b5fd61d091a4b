import { shelfEndpoints } from '#shared/schemas/shelf'
import { archiveShelfItem } from '../../../../../services/shelf'

export default defineRoute(shelfEndpoints.archiveShelfItem, ({ event, studio, body, idParam }) => archiveShelfItem(studio, shelfParam(event), idParam('item'), body.revision))
