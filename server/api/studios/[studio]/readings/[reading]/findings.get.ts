import { findingEndpoints } from '#shared/schemas/findings'
import { findingsOf } from '../../../../../services/findings'

export default defineRoute(findingEndpoints.findings, ({ studio, idParam }) => findingsOf(studio, idParam('reading')))
