import { peopleEndpoints } from '#shared/schemas/people'
import { withinToken } from '../../services/access'
import { studiosOf } from '../../services/people'

export default defineRoute(peopleEndpoints.me, async ({ person: { id, name, email, token } }) =>
  ({ user: { id, name, email }, studios: (await studiosOf(id)).flatMap(studio => withinToken(token, studio) ?? []) }))
