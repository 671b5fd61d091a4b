import { passkeyEndpoints } from '#shared/schemas/passkeys'
import { removePasskey } from '../../../services/passkeys'

export default defineRoute(passkeyEndpoints.removePasskey, async ({ event, person, idParam }) => {
  await removePasskey(person, idParam('passkey'))
  setResponseStatus(event, 204)
})
