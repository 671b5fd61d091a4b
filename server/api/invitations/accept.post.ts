import { peopleEndpoints } from '#shared/schemas/people'
import { acceptInvitation } from '../../services/invitations'

export default defineRoute(peopleEndpoints.acceptInvitation, ({ person, body }) => acceptInvitation(person.id, body.token))
