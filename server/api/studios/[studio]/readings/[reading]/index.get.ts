import { curveEndpoints } from '#shared/schemas/curves'
import { readingOf } from '../../../../../services/readings'

export default defineRoute(curveEndpoints.reading, ({ studio, idParam }) => readingOf(studio, idParam('reading')))
