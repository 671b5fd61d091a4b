import { peopleEndpoints } from '#shared/schemas/people'
import { askStudioErasure } from '../../../services/erasure'

export default defineRoute(peopleEndpoints.eraseStudio, async ({ person, studio, body }) =>
  ({ eraseAfter: (await askStudioErasure(studio, person.name, body.name)).toISOString() }))
