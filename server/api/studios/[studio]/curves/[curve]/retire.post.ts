import { curveEndpoints } from '#shared/schemas/curves'
import { retireCurve } from '../../../../../services/curves'

export default defineRoute(curveEndpoints.retireCurve, ({ studio, idParam }) => retireCurve(studio, idParam('curve')))
