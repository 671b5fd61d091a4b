import { scannerProfileEndpoints } from '#shared/schemas/calibration'
import { createScannerProfile } from '../../../../../services/scanner-profiles'

export default defineRoute(scannerProfileEndpoints.createScannerProfile, async ({ event, studio, body, idParam }) => {
  const { created, item } = await createScannerProfile(studio, idParam('scanner'), body)
  setResponseStatus(event, created ? 201 : 200)
  return item
})
