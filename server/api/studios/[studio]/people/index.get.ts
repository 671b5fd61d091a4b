import { peopleEndpoints } from '#shared/schemas/people'
import { peopleOf } from '../../../../services/people'

export default defineRoute(peopleEndpoints.people, async ({ studio }) => ({ items: await peopleOf(studio) }))
