import { negativeEndpoints } from '#shared/schemas/negatives'
import { changeNegative } from '../../../../../services/negatives'

export default defineRoute(negativeEndpoints.changeNegative, ({ studio, idParam, body }) => changeNegative(studio, idParam('negative'), body))
