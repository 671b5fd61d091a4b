import { tabletEndpoints } from '#shared/schemas/calibration'
import { createFilmCurve } from '../../../../../../../services/film-densities'

export default defineRoute(tabletEndpoints.filmCurve, async ({ event, studio, body, idParam }) => {
  const { created, item } = await createFilmCurve(studio, idParam('bench'), idParam('tablet'), body)
  setResponseStatus(event, created ? 201 : 200)
  return item
})
