import { scanEndpoints } from '#shared/schemas/scans'
import { readAgain } from '../../../../../services/scan-again'

export default defineRoute(scanEndpoints.readAgain, async ({ event, studio, body, idParam }) => {
  const { status, item } = await readAgain(studio, idParam('reading'), body, event.context.requestId)
  setResponseStatus(event, status)
  return item
})
