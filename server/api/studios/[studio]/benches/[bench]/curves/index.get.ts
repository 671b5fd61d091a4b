import { curveEndpoints } from '#shared/schemas/curves'
import { listCurves } from '../../../../../../services/curves'

export default defineRoute(curveEndpoints.listCurves, ({ studio, query, idParam }) => listCurves(studio, idParam('bench'), query))
