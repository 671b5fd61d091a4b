import { pictureEndings, pictureMediaType } from '#shared/schemas/picture-formats'
import { scanEndpoints } from '#shared/schemas/scans'
import { fileNameFrom } from '../../../../../services/file-names'
import { requireScan } from '../../../../../services/scan-pictures'
import { storageKeys } from '../../../../../storage'

export default defineRoute(scanEndpoints.readingFile, async ({ event, studio, idParam }) => {
  const { studioId, id, fileName, fileFormat, fileBytes, fileSha256 } = await requireScan(studio, idParam('reading'))
  await sendStoredFile(event, {
    key: storageKeys.scan(studioId, id), bytes: fileBytes, etag: fileSha256, cacheControl: privateForever,
    contentType: fileFormat ? pictureMediaType(fileFormat) : 'application/octet-stream', fileName: fileNameFrom(fileName ?? 'Scan', fileFormat ? pictureEndings[fileFormat][0] : 'scan'),
  })
})
