import { scanEndpoints } from '#shared/schemas/scans'
import { receiveScan } from '../../../../../../utils/receive-scan'

export default defineRoute(scanEndpoints.createWedgeReading, ({ event, studio, idParam }) => receiveScan(event, studio, { wedgeId: idParam('wedge') }))
