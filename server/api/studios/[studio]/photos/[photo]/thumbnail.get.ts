import { photoEndpoints } from '#shared/schemas/photos'
import { thumbnailOf } from '../../../../../services/photo-pictures'
import { requirePhoto } from '../../../../../services/photos'

export default defineRoute(photoEndpoints.photoThumbnail, async ({ event, studio, idParam }) => {
  const picture = await thumbnailOf(await requirePhoto(studio, idParam('photo')))
  await sendStoredFile(event, { ...picture, contentType: 'image/jpeg', cacheControl: privateForever })
})
