import { peopleEndpoints } from '#shared/schemas/people'
import { keepStudio } from '../../../services/erasure'

export default defineRoute(peopleEndpoints.keepStudio, async ({ event, studio }) => {
  await keepStudio(studio)
  setResponseStatus(event, 204)
})
