import { peopleEndpoints } from '#shared/schemas/people'
import { signOut } from '../../services/people'
import { personOfSession } from '../../services/sessions'

export default defineRoute(peopleEndpoints.logout, async ({ event }) => {
  const sessionId = await sessionIdOf(event)
  const person = sessionId && await personOfSession(sessionId)
  if (person) await signOut(person.id, sessionId)
  await dropSession(event)
  setResponseStatus(event, 204)
})
