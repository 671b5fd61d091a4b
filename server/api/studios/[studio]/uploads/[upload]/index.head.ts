import { uploadEndpoints } from '#shared/schemas/uploads'

export default defineRoute(uploadEndpoints.uploadOffset, ({ event, studio, idParam }) => answerTus(event, studio, idParam('upload')))
