import { curveEndpoints } from '#shared/schemas/curves'
import { createReading } from '../../../../../../services/readings'
import { mediaType } from '../../../../../../utils/read-body'
import { receiveScan } from '../../../../../../utils/receive-scan'

export default defineRoute(curveEndpoints.createReading, async ({ event, studio, body, text, query, idParam }) => {
  const benchId = idParam('bench')
  if (mediaType(event) === 'multipart/form-data') return await receiveScan(event, studio, { benchId })
  const { created, item } = await createReading(studio, benchId, body ? { body } : { text: text ?? '', query })
  setResponseStatus(event, created ? 201 : 200)
  return item
})
