import { peopleEndpoints } from '#shared/schemas/people'
import { removePerson } from '../../../../services/people'

export default defineRoute(peopleEndpoints.removePerson, async ({ event, studio, idParam }) => {
  await removePerson(studio, idParam('person'))
  setResponseStatus(event, 204)
})
