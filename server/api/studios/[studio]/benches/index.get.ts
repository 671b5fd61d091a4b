import { benchEndpoints } from '#shared/schemas/benches'
import { listBenches } from '../../../../services/benches'

export default defineRoute(benchEndpoints.listBenches, ({ studio, query }) => listBenches(studio, query))
