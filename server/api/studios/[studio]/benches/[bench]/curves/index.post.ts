import { curveEndpoints } from '#shared/schemas/curves'
import { createCurve } from '../../../../../../services/curves'

export default defineRoute(curveEndpoints.createCurve, async ({ event, studio, body, idParam }) => {
  const { created, item } = await createCurve(studio, idParam('bench'), body)
  setResponseStatus(event, created ? 201 : 200)
  return item
})
