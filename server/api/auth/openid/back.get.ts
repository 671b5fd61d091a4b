import { openIdEndpoints } from '#shared/schemas/openid'
import { finishOpenId } from '../../../services/openid'

/** A person's browser comes here by itself, so whatever goes wrong is answered with a page. */
export default defineRoute(openIdEndpoints.openIdBack, async ({ event }) => {
  try {
    await countAttempt(event, 'openid')
    const { path, sessionId } = await finishOpenId(takeOpenIdSecret(event), getRequestURL(event).search, await sessionIdOf(event))
    if (sessionId) await keepSession(event, sessionId)
    await sendRedirect(event, path)
  }
  catch (error) {
    await sendRedirect(event, `/sign-in-problem?why=${answerError(event, error).data.code}`)
  }
})
