import { photoEndpoints } from '#shared/schemas/photos'
import { renamePhoto } from '../../../../../services/photos'

export default defineRoute(photoEndpoints.changePhoto, ({ studio, idParam, body }) => renamePhoto(studio, idParam('photo'), body))
