import { negativeEndpoints } from '#shared/schemas/negatives'
import { filmFileName } from '../../../../../services/file-names'
import { requireParts } from '../../../../../services/negative-parts'
import { filmRequest } from '../../../../../services/negatives'

export default defineRoute(negativeEndpoints.negativeFile, async ({ event, studio, query, idParam }) => {
  const parts = await requireParts(studio, idParam('negative'))
  return await sendFilm(event, filmRequest(parts, query.format, event.context.requestId), filmFileName(parts, query.format))
})
