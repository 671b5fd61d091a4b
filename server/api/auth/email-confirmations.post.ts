import { accountEndpoints } from '#shared/schemas/account'
import { confirmEmail } from '../../services/accounts'

export default defineRoute(accountEndpoints.confirmEmail, async ({ event, body }) => {
  await countAttempt(event, 'link')
  return { user: await confirmEmail(body.token) }
})
