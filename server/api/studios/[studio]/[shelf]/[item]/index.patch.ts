import { shelfEndpoints } from '#shared/schemas/shelf'
import { changeShelfItem } from '../../../../../services/shelf'

export default defineRoute(shelfEndpoints.changeShelfItem, ({ event, studio, body, idParam }) => changeShelfItem(studio, shelfParam(event), idParam('item'), body))
