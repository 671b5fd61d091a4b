import { accountEndpoints } from '#shared/schemas/account'
import { letterSwitchesOf } from '../../services/letters'

export default defineRoute(accountEndpoints.letterSwitches, ({ person }) => letterSwitchesOf(person.id))
