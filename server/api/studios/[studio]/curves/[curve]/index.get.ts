import { curveEndpoints } from '#shared/schemas/curves'
import { curveOf } from '../../../../../services/curves'

export default defineRoute(curveEndpoints.curve, ({ studio, idParam }) => curveOf(studio, idParam('curve')))
