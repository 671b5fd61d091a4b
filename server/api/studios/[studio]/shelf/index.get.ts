import { shelfEndpoints } from '#shared/schemas/shelf'
import { searchShelf } from '../../../../services/shelf-search'

export default defineRoute(shelfEndpoints.searchShelf, ({ studio, query }) => searchShelf(studio, query))
