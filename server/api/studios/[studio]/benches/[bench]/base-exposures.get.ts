import { benchEndpoints } from '#shared/schemas/benches'
import { listBaseExposures } from '../../../../../services/base-exposures'

export default defineRoute(benchEndpoints.listBaseExposures, ({ studio, query, idParam }) => listBaseExposures(studio, idParam('bench'), query))
