import { photoEndpoints } from '#shared/schemas/photos'
import { proxyOf } from '../../../../../services/photo-pictures'
import { requirePhoto } from '../../../../../services/photos'

export default defineRoute(photoEndpoints.photoProxy, async ({ event, studio, query, idParam }) => {
  const { width, height, ...picture } = await proxyOf(await requirePhoto(studio, idParam('photo')), query)
  setResponseHeaders(event, { 'x-width': width, 'x-height': height })
  await sendStoredFile(event, { ...picture, contentType: 'application/octet-stream', cacheControl: privateForever })
})
