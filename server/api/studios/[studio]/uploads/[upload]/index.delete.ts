import { uploadEndpoints } from '#shared/schemas/uploads'

export default defineRoute(uploadEndpoints.removeUpload, ({ event, studio, idParam }) => answerTus(event, studio, idParam('upload')))
