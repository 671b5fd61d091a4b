import { peopleEndpoints } from '#shared/schemas/people'
import { removeDemo } from '../../../services/demo-removal'

export default defineRoute(peopleEndpoints.removeDemo, async ({ event, studio }) => {
  await removeDemo(studio)
  setResponseStatus(event, 204)
})
