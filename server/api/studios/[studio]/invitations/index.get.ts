import { peopleEndpoints } from '#shared/schemas/people'
import { listInvitations } from '../../../../services/invitations'

export default defineRoute(peopleEndpoints.listInvitations, ({ studio, query }) => listInvitations(studio, query))
