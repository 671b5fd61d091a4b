import { classEndpoints } from '#shared/schemas/classes'
import { listClasses } from '../../../../services/classes'

export default defineRoute(classEndpoints.listClasses, ({ studio, query }) => listClasses(studio, query))
