import { scannerProfileEndpoints } from '#shared/schemas/calibration'
import { archiveScannerProfile } from '../../../../../services/scanner-profiles'

export default defineRoute(scannerProfileEndpoints.archiveScannerProfile, async ({ event, studio, idParam }) => {
  await archiveScannerProfile(studio, idParam('scanner'), idParam('profile'))
  setResponseStatus(event, 204)
  return null
})
