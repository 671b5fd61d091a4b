import { accountEndpoints } from '#shared/schemas/account'
import { signOutEverywhere } from '../../services/people'

export default defineRoute(accountEndpoints.signOutEverywhere, async ({ event, person }) => {
  await signOutEverywhere(person.id)
  await dropSession(event)
  setResponseStatus(event, 204)
})
