import { photoEndpoints } from '#shared/schemas/photos'
import { listPhotos } from '../../../../services/photos'

export default defineRoute(photoEndpoints.listPhotos, ({ studio, query }) => listPhotos(studio, query))
