import { uploadEndpoints } from '#shared/schemas/uploads'
import { listUploads } from '../../../../services/uploads'

export default defineRoute(uploadEndpoints.listUploads, ({ studio, query }) => listUploads(studio, query))
