import { openIdEndpoints } from '#shared/schemas/openid'
import { beginOpenId } from '../../../services/openid'

export default defineRoute(openIdEndpoints.openIdAgain, async ({ event, person, body }) => {
  await countAttempt(event, 'openid')
  const { url, secret } = await beginOpenId({ ...body, againSessionId: person.session.id })
  keepOpenIdSecret(event, secret)
  return { url }
})
