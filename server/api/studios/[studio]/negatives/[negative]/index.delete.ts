import { negativeEndpoints } from '#shared/schemas/negatives'
import { archiveNegative } from '../../../../../services/negatives'

export default defineRoute(negativeEndpoints.archiveNegative, async ({ event, studio, idParam }) => {
  await archiveNegative(studio, idParam('negative'))
  setResponseStatus(event, 204)
  return null
})
