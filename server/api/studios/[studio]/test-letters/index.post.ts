import { peopleEndpoints } from '#shared/schemas/people'
import { postTestLetter } from '../../../../services/test-letters'

export default defineRoute(peopleEndpoints.sendTestLetter, async ({ event, person, studio }) => {
  await countAttempt(event, 'letters', person.id)
  setResponseStatus(event, 202)
  return { id: await postTestLetter(studio, person) }
})
