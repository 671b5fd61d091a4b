import { peopleEndpoints } from '#shared/schemas/people'
import { db } from '../../db/client'
import { openStudio } from '../../services/people'

export default defineRoute(peopleEndpoints.createStudio, async ({ event, person, body }) => {
  setResponseStatus(event, 201)
  return await db().transaction(tx => openStudio(tx, person.id, body.name))
})
