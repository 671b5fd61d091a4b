import { passkeyEndpoints } from '#shared/schemas/passkeys'
import { signInAgainByPasskey } from '../../../services/passkeys'

export default defineRoute(passkeyEndpoints.passkeyAgain, async ({ event, person, body }) => {
  await countAttempt(event, 'passkey')
  await signInAgainByPasskey(person.id, person.session.id, body.credential)
  setResponseStatus(event, 204)
})
