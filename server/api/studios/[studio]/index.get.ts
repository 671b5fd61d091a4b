import { peopleEndpoints } from '#shared/schemas/people'
import { studioDetails } from '../../../services/people'

export default defineRoute(peopleEndpoints.studio, async ({ studio: { id, slug, name, role } }) =>
  ({ id, slug, name, role, ...await studioDetails(id) }))
