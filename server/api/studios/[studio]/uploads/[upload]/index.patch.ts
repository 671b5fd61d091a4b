import { uploadEndpoints } from '#shared/schemas/uploads'

export default defineRoute(uploadEndpoints.sendUpload, ({ event, studio, idParam }) => answerTus(event, studio, idParam('upload')))
