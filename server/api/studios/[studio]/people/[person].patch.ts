import { peopleEndpoints } from '#shared/schemas/people'
import { changeRole } from '../../../../services/people'

export default defineRoute(peopleEndpoints.changePerson, ({ studio, body, idParam }) => changeRole(studio, idParam('person'), body.role))
