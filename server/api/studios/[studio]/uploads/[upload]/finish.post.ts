import { uploadEndpoints } from '#shared/schemas/uploads'
import { finishUpload } from '../../../../../services/upload-intake'

export default defineRoute(uploadEndpoints.finishUpload, async ({ event, studio, idParam }) => {
  const { photo, isNew } = await finishUpload(studio, idParam('upload'))
  setResponseStatus(event, isNew ? 201 : 200)
  return photo
})
