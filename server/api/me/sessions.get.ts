import { accountEndpoints } from '#shared/schemas/account'
import { sessionsOf } from '../../services/sessions'

export default defineRoute(accountEndpoints.listSessions, async ({ person }) => ({ items: await sessionsOf(person.id, person.session.id) }))
