import { peopleEndpoints } from '#shared/schemas/people'
import { renameStudio } from '../../../services/people'

export default defineRoute(peopleEndpoints.changeStudio, ({ studio, body: { name, revision } }) => renameStudio(studio, name, revision))
