import { passkeyEndpoints } from '#shared/schemas/passkeys'
import { optionsToAdd } from '../../../services/passkeys'

export default defineRoute(passkeyEndpoints.passkeyOptions, async ({ event, person }) => {
  await countAttempt(event, 'passkey')
  return await optionsToAdd(person)
})
