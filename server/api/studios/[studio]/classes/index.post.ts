import { classEndpoints } from '#shared/schemas/classes'
import { openClass } from '../../../../services/classes'

export default defineRoute(classEndpoints.openClass, async ({ event, studio, body }) => {
  const { created, item } = await openClass(studio, body)
  setResponseStatus(event, created ? 201 : 200)
  return item
})
