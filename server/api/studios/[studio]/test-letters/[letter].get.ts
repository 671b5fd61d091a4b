import { peopleEndpoints } from '#shared/schemas/people'
import { testLetterState } from '../../../../services/test-letters'

export default defineRoute(peopleEndpoints.testLetter, ({ studio, idParam }) => testLetterState(studio.id, idParam('letter')))
