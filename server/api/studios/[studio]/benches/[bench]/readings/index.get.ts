import { curveEndpoints } from '#shared/schemas/curves'
import { listReadings } from '../../../../../../services/readings'

export default defineRoute(curveEndpoints.listReadings, ({ studio, query, idParam }) => listReadings(studio, idParam('bench'), query))
