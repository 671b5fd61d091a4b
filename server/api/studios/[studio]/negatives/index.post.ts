import { negativeEndpoints } from '#shared/schemas/negatives'
import { createNegative } from '../../../../services/negatives'

export default defineRoute(negativeEndpoints.createNegative, async ({ event, studio, body }) => {
  const { created, item } = await createNegative(studio, body)
  setResponseStatus(event, created ? 201 : 200)
  return item
})
