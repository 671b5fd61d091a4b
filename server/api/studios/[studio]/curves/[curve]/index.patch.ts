import { curveEndpoints } from '#shared/schemas/curves'
import { changeCurve } from '../../../../../services/curves'

export default defineRoute(curveEndpoints.changeCurve, ({ studio, idParam, body }) => changeCurve(studio, idParam('curve'), body))
