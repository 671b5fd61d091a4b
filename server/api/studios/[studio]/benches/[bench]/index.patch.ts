import { benchEndpoints } from '#shared/schemas/benches'
import { changeBench } from '../../../../../services/benches'

export default defineRoute(benchEndpoints.changeBench, ({ studio, body, idParam }) => changeBench(studio, idParam('bench'), body))
