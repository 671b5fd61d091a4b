import { accountEndpoints } from '#shared/schemas/account'
import { listTokens } from '../../../services/tokens'

export default defineRoute(accountEndpoints.listTokens, async ({ person }) => ({ items: await listTokens(person.id) }))
