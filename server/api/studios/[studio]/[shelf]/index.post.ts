import { shelfEndpoints } from '#shared/schemas/shelf'
import { createShelfItem } from '../../../../services/shelf'

export default defineRoute(shelfEndpoints.createShelfItem, async ({ event, studio, body }) => {
  const { created, item } = await createShelfItem(studio, shelfParam(event), body)
  setResponseStatus(event, created ? 201 : 200)
  return item
})
