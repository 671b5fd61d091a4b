import { curveEndpoints } from '#shared/schemas/curves'
import { createReading } from '../../../../../../services/readings'

export default defineRoute(curveEndpoints.createReading, async ({ event, studio, body, text, query, idParam }) => {
  const { created, item } = await createReading(studio, idParam('bench'), body ? { body } : { text: text ?? '', query })
  setResponseStatus(event, created ? 201 : 200)
  return item
})
