import { peopleEndpoints } from '#shared/schemas/people'
import { revokeInvitation } from '../../../../services/invitations'

export default defineRoute(peopleEndpoints.revokeInvitation, async ({ event, studio, idParam }) => {
  await revokeInvitation(studio, idParam('invitation'))
  setResponseStatus(event, 204)
})
