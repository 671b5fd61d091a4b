import { tabletEndpoints } from '#shared/schemas/calibration'
import { listFilmDensities } from '../../../../../services/film-densities'

export default defineRoute(tabletEndpoints.listFilmDensities, ({ studio, query, idParam }) => listFilmDensities(studio, idParam('bench'), query))
