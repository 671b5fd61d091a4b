import { benchEndpoints } from '#shared/schemas/benches'
import { createBaseExposure } from '../../../../../services/base-exposures'
import { requireRead } from '../../../../../services/scan-waiting'
import { mediaType } from '../../../../../utils/read-body'
import { receiveScan } from '../../../../../utils/receive-scan'

export default defineRoute(benchEndpoints.createBaseExposure, async ({ event, studio, body, idParam }) => {
  const benchId = idParam('bench')
  const scanned = mediaType(event) === 'multipart/form-data' ? await receiveScan(event, studio, { benchId }) : undefined
  if (scanned && !requireRead(scanned)) return scanned
  const { created, item } = await createBaseExposure(studio, benchId, scanned ? { readingId: scanned.id } : body!)
  setResponseStatus(event, created ? 201 : 200)
  return item
})
