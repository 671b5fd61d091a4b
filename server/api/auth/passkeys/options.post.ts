import { passkeyEndpoints } from '#shared/schemas/passkeys'
import { optionsToSignIn } from '../../../services/passkeys'

export default defineRoute(passkeyEndpoints.passkeySignInOptions, async ({ event }) => {
  await countAttempt(event, 'passkey')
  return await optionsToSignIn()
})
