import { contract } from '#shared/schemas/contract'
import { requireReady } from '../../services/health'
import { defineRoute } from '../../utils/define-route'

export default defineRoute(contract.ready, async () => {
  await requireReady()
  return { status: 'ok' }
})
