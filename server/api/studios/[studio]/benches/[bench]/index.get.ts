import { benchEndpoints } from '#shared/schemas/benches'
import { benchOf } from '../../../../../services/benches'

export default defineRoute(benchEndpoints.bench, ({ studio, idParam }) => benchOf(studio, idParam('bench')))
