import { curveEndpoints } from '#shared/schemas/curves'
import { useCurve } from '../../../../../services/curves'

export default defineRoute(curveEndpoints.useCurve, ({ studio, idParam }) => useCurve(studio, idParam('curve')))
