import { uploadEndpoints } from '#shared/schemas/uploads'

export default defineRoute(uploadEndpoints.uploadTerms, ({ event, studio }) => answerTus(event, studio))
