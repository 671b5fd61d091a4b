import { passkeyEndpoints } from '#shared/schemas/passkeys'
import { signInByPasskey } from '../../../services/passkeys'
import { studiosOf } from '../../../services/people'

export default defineRoute(passkeyEndpoints.passkeySignIn, async ({ event, body }) => {
  await countAttempt(event, 'passkey')
  const { sessionId, user } = await signInByPasskey(body.credential)
  await keepSession(event, sessionId)
  return { user, studios: await studiosOf(user.id) }
})
