import { peopleEndpoints } from '#shared/schemas/people'
import { invite } from '../../../../services/invitations'

export default defineRoute(peopleEndpoints.invite, async ({ event, person, studio, body }) => {
  await countAttempt(event, 'letters', person.id)
  const { created, item } = await invite(studio, person, body)
  setResponseStatus(event, created ? 201 : 200)
  return item
})
