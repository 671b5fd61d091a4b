import { passkeyEndpoints } from '#shared/schemas/passkeys'
import { addPasskey } from '../../../services/passkeys'

export default defineRoute(passkeyEndpoints.addPasskey, async ({ event, person, body }) => {
  const added = await addPasskey(person, body)
  setResponseStatus(event, 201)
  return added
})
