import { photoEndpoints } from '#shared/schemas/photos'
import { requirePhoto, showPhoto } from '../../../../../services/photos'

export default defineRoute(photoEndpoints.photo, async ({ studio, idParam }) => showPhoto(await requirePhoto(studio, idParam('photo'))))
