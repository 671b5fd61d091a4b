import { accountEndpoints } from '#shared/schemas/account'
import { changeName } from '../../services/accounts'
import { studiosOf } from '../../services/people'

export default defineRoute(accountEndpoints.changeMe, async ({ person, body }) =>
  ({ user: await changeName(person.id, body.name), studios: await studiosOf(person.id) }))
