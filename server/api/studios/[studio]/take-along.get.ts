import { classEndpoints } from '#shared/schemas/classes'
import { fileNameFrom } from '../../../services/file-names'
import { thingsOf } from '../../../services/take-along'

export default defineRoute(classEndpoints.takeAlong, ({ event, person, studio }) =>
  sendZip(event, thingsOf(studio, event.context.requestId), fileNameFrom(`${person.name}, ${studio.name}`, 'zip')))
