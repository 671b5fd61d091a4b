import { benchEndpoints } from '#shared/schemas/benches'
import { createBaseExposure } from '../../../../../services/base-exposures'

export default defineRoute(benchEndpoints.createBaseExposure, async ({ event, studio, body, idParam }) => {
  const { created, item } = await createBaseExposure(studio, idParam('bench'), body)
  setResponseStatus(event, created ? 201 : 200)
  return item
})
