import { benchEndpoints } from '#shared/schemas/benches'
import { createBench } from '../../../../services/benches'

export default defineRoute(benchEndpoints.createBench, async ({ event, studio, body }) => {
  const { created, item } = await createBench(studio, body)
  setResponseStatus(event, created ? 201 : 200)
  return item
})
