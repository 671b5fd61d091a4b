import { passkeyEndpoints } from '#shared/schemas/passkeys'
import { waysInOf } from '../../services/ways-in'

export default defineRoute(passkeyEndpoints.ownWaysIn, ({ person }) => waysInOf(person.id))
