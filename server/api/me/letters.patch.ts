import { accountEndpoints } from '#shared/schemas/account'
import { changeLetterSwitches } from '../../services/letters'

export default defineRoute(accountEndpoints.changeLetterSwitches, ({ person, body }) => changeLetterSwitches(person.id, body))
