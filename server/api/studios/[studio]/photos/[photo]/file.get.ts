import { photoEndpoints } from '#shared/schemas/photos'
import { pictureEndings, pictureMediaType } from '#shared/schemas/picture-formats'
import { fileNameFrom } from '../../../../../services/file-names'
import { requireOwnPhoto } from '../../../../../services/photos'
import { storageKeys } from '../../../../../storage'

export default defineRoute(photoEndpoints.photoFile, async ({ event, studio, idParam }) => {
  const photo = await requireOwnPhoto(studio, idParam('photo'))
  await sendStoredFile(event, {
    key: storageKeys.original(photo.studioId, photo.id), bytes: photo.bytes, etag: photo.sha256,
    contentType: pictureMediaType(photo.format), cacheControl: privateForever, fileName: fileNameFrom(photo.name, pictureEndings[photo.format][0]),
  })
})
