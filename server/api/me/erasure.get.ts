import { accountEndpoints } from '#shared/schemas/account'
import { erasureOf } from '../../services/erasure'

export default defineRoute(accountEndpoints.erasureOfMe, ({ person }) => erasureOf(person.id))
