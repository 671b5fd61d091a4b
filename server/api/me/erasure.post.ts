import { accountEndpoints } from '#shared/schemas/account'
import { askAccountErasure } from '../../services/erasure'

export default defineRoute(accountEndpoints.eraseMe, async ({ person }) => ({ eraseAfter: (await askAccountErasure(person)).toISOString() }))
