import { wedgeEndpoints } from '#shared/schemas/wedges'
import { createWedgePrint } from '../../../../../../services/wedge-prints'

export default defineRoute(wedgeEndpoints.createWedgePrint, async ({ event, studio, body, idParam }) => {
  const { created, item } = await createWedgePrint(studio, idParam('wedge'), body)
  setResponseStatus(event, created ? 201 : 200)
  return item
})
