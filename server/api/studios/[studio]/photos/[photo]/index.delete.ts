import { photoEndpoints } from '#shared/schemas/photos'
import { binPhoto } from '../../../../../services/photos'

export default defineRoute(photoEndpoints.binPhoto, async ({ event, studio, idParam }) => {
  await binPhoto(studio, idParam('photo'))
  setResponseStatus(event, 204)
  return null
})
