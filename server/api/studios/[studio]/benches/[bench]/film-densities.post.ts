import { tabletEndpoints } from '#shared/schemas/calibration'
import { createFilmDensities } from '../../../../../services/film-densities'

export default defineRoute(tabletEndpoints.createFilmDensities, async ({ event, studio, body, idParam }) => {
  const { created, item } = await createFilmDensities(studio, idParam('bench'), body)
  setResponseStatus(event, created ? 201 : 200)
  return item
})
