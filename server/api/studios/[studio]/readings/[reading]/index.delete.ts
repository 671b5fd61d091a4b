import { scanEndpoints } from '#shared/schemas/scans'
import { deleteReading } from '../../../../../services/readings'

export default defineRoute(scanEndpoints.deleteReading, async ({ event, studio, idParam }) => {
  await deleteReading(studio, idParam('reading'))
  setResponseStatus(event, 204)
  return null
})
