import { passkeyEndpoints } from '#shared/schemas/passkeys'
import { waysIn } from '../../services/ways-in'

export default defineRoute(passkeyEndpoints.waysIn, () => waysIn())
