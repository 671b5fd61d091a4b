import { uploadEndpoints } from '#shared/schemas/uploads'
import { requireUpload, showUpload } from '../../../../../services/uploads'

export default defineRoute(uploadEndpoints.upload, async ({ studio, idParam }) => showUpload(await requireUpload(studio, idParam('upload'))))
