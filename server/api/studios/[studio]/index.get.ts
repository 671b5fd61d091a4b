import { peopleEndpoints } from '#shared/schemas/people'
import { studioDetailsOf } from '../../../services/people'

export default defineRoute(peopleEndpoints.studio, ({ studio }) => studioDetailsOf(studio))
