import { tabletEndpoints } from '#shared/schemas/calibration'
import { createTablet } from '../../../../../../services/tablets'

export default defineRoute(tabletEndpoints.createTablet, async ({ event, studio, body, idParam }) => {
  const { created, item } = await createTablet(studio, idParam('bench'), body)
  setResponseStatus(event, created ? 201 : 200)
  return item
})
