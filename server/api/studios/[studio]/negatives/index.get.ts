import { negativeEndpoints } from '#shared/schemas/negatives'
import { listNegatives } from '../../../../services/negatives'

export default defineRoute(negativeEndpoints.listNegatives, ({ studio, query }) => listNegatives(studio, query))
