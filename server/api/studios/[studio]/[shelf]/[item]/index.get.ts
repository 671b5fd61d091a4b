import { shelfEndpoints } from '#shared/schemas/shelf'
import { shelfItem } from '../../../../../services/shelf'

export default defineRoute(shelfEndpoints.shelfItem, ({ event, studio, idParam }) => shelfItem(studio, shelfParam(event), idParam('item')))
