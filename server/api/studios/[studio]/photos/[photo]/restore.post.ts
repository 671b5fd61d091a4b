import { photoEndpoints } from '#shared/schemas/photos'
import { restorePhoto } from '../../../../../services/photos'

export default defineRoute(photoEndpoints.restorePhoto, ({ studio, idParam }) => restorePhoto(studio, idParam('photo')))
