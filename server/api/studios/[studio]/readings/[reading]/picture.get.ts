import { scanEndpoints } from '#shared/schemas/scans'
import { requireScan, scanPicture } from '../../../../../services/scan-pictures'

export default defineRoute(scanEndpoints.readingPicture, async ({ event, studio, query, idParam }) => {
  const picture = await scanPicture(await requireScan(studio, idParam('reading')), query)
  // Read again, the same address may show other cells.
  await sendStoredFile(event, { ...picture, contentType: 'image/jpeg', cacheControl: query.cells ? privateAskAgain : privateForever })
})
