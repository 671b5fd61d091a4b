import { negativeEndpoints } from '#shared/schemas/negatives'
import { requireParts } from '../../../../../services/negative-parts'
import { filmRequest } from '../../../../../services/negatives'
import { retryRender, showRender } from '../../../../../services/renders'

export default defineRoute(negativeEndpoints.makeRender, async ({ event, studio, body, idParam }) => {
  const parts = await requireParts(studio, idParam('negative'))
  const render = showRender(await retryRender(filmRequest(parts, body.format, event.context.requestId)))
  setResponseStatus(event, render.state === 'ready' ? 200 : 202)
  return render
})
