import { contract } from '#shared/schemas/contract'
import { defineRoute } from '../../utils/define-route'

export default defineRoute(contract.live, () => ({ status: 'ok' }))
