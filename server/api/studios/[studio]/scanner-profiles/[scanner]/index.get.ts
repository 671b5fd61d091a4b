import { scannerProfileEndpoints } from '#shared/schemas/calibration'
import { listScannerProfiles } from '../../../../../services/scanner-profiles'

export default defineRoute(scannerProfileEndpoints.listScannerProfiles, ({ studio, query, idParam }) => listScannerProfiles(studio, idParam('scanner'), query))
