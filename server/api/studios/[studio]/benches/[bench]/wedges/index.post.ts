import { wedgeEndpoints } from '#shared/schemas/wedges'
import { createWedge } from '../../../../../../services/wedges'

export default defineRoute(wedgeEndpoints.createWedge, async ({ event, studio, body, idParam }) => {
  const { created, item } = await createWedge(studio, idParam('bench'), body)
  setResponseStatus(event, created ? 201 : 200)
  return item
})
