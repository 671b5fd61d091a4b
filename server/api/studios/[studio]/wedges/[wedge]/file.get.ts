import { wedgeEndpoints } from '#shared/schemas/wedges'
import { wedgeFileName } from '../../../../../services/file-names'
import { wedgeFilmRequest } from '../../../../../services/wedge-films'
import { requireWedgeParts } from '../../../../../services/wedge-parts'

export default defineRoute(wedgeEndpoints.wedgeFile, async ({ event, studio, query, idParam }) => {
  const parts = await requireWedgeParts(studio.id, idParam('wedge'))
  const film = wedgeFilmRequest(parts, query.format, event.context.requestId)
  return await sendFilm(event, film, wedgeFileName(parts, film.order.title, query.format))
})
