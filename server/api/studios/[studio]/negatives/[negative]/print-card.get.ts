import { negativeEndpoints } from '#shared/schemas/negatives'
import { requireParts } from '../../../../../services/negative-parts'
import { printCard } from '../../../../../services/print-card'

export default defineRoute(negativeEndpoints.negativePrintCard, async ({ studio, query, idParam }) =>
  printCard(await requireParts(studio, idParam('negative')), query.format))
