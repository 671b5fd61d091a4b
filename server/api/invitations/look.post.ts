import { peopleEndpoints } from '#shared/schemas/people'
import { lookAtInvitation } from '../../services/invitations'

export default defineRoute(peopleEndpoints.lookAtInvitation, async ({ event, body }) => {
  await countAttempt(event, 'link')
  return await lookAtInvitation(body.token)
})
