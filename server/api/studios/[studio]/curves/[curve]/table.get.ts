import { curveEndpoints } from '#shared/schemas/curves'
import { curveTable, tableFormats } from '../../../../../services/curve-table'

export default defineRoute(curveEndpoints.curveTable, async ({ event, studio, query, idParam }) => {
  const { fileName, text } = await curveTable(studio, idParam('curve'), query.format)
  setResponseHeader(event, 'Content-Type', tableFormats[query.format])
  setResponseHeader(event, 'Content-Disposition', `attachment; filename="${fileName}"`)
  return text
})
