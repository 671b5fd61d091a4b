import { passkeyEndpoints } from '#shared/schemas/passkeys'
import { optionsToSignInAgain } from '../../../services/passkeys'

export default defineRoute(passkeyEndpoints.passkeyAgainOptions, async ({ event, person }) => {
  await countAttempt(event, 'passkey')
  return await optionsToSignInAgain(person.id)
})
