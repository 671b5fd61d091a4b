import { benchEndpoints } from '#shared/schemas/benches'
import { copyBench } from '../../../../../services/benches'

export default defineRoute(benchEndpoints.copyBench, async ({ event, studio, body, idParam }) => {
  const { created, item } = await copyBench(studio, idParam('bench'), body)
  setResponseStatus(event, created ? 201 : 200)
  return item
})
