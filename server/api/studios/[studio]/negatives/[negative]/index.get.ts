import { negativeEndpoints } from '#shared/schemas/negatives'
import { negativeOf } from '../../../../../services/negatives'

export default defineRoute(negativeEndpoints.negative, ({ studio, idParam }) => negativeOf(studio, idParam('negative')))
