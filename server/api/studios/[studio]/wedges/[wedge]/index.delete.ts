import { wedgeEndpoints } from '#shared/schemas/wedges'
import { archiveWedge } from '../../../../../services/wedges'

export default defineRoute(wedgeEndpoints.archiveWedge, async ({ event, studio, idParam }) => {
  await archiveWedge(studio, idParam('wedge'))
  setResponseStatus(event, 204)
  return null
})
