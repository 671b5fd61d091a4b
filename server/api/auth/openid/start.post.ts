import { openIdEndpoints } from '#shared/schemas/openid'
import { beginOpenId } from '../../../services/openid'

export default defineRoute(openIdEndpoints.openIdStart, async ({ event, body }) => {
  await countAttempt(event, 'openid')
  const { url, secret } = await beginOpenId(body)
  keepOpenIdSecret(event, secret)
  return { url }
})
