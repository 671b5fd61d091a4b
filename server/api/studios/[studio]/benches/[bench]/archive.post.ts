import { benchEndpoints } from '#shared/schemas/benches'
import { archiveBench } from '../../../../../services/benches'

export default defineRoute(benchEndpoints.archiveBench, ({ studio, body, idParam }) => archiveBench(studio, idParam('bench'), body.revision))
