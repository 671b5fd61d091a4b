import { comparisonEndpoints } from '#shared/schemas/calibration'
import { comparisonOf } from '../../../../../services/comparisons'

export default defineRoute(comparisonEndpoints.compareBenches, ({ studio, query, idParam }) => comparisonOf(studio, idParam('bench'), query.with))
