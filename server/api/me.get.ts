import { peopleEndpoints } from '#shared/schemas/people'
import { studiosOf } from '../services/people'

export default defineRoute(peopleEndpoints.me, async ({ person: { id, name, email } }) =>
  ({ user: { id, name, email }, studios: await studiosOf(id) }))
