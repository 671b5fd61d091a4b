import { passkeyEndpoints } from '#shared/schemas/passkeys'
import { listPasskeys } from '../../../services/passkeys'

export default defineRoute(passkeyEndpoints.listPasskeys, async ({ person }) => ({ items: await listPasskeys(person.id) }))
