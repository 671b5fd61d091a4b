import { wedgeEndpoints } from '#shared/schemas/wedges'
import { changeWedgePrint } from '../../../../services/wedge-prints'

export default defineRoute(wedgeEndpoints.changeWedgePrint, ({ studio, body, idParam }) => changeWedgePrint(studio, idParam('print'), body))
