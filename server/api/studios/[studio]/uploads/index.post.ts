import { uploadEndpoints } from '#shared/schemas/uploads'

export default defineRoute(uploadEndpoints.createUpload, ({ event, studio }) => answerTus(event, studio))
