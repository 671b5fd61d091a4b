import { walkEndpoints } from '#shared/schemas/calibration'
import { changeWalkStep } from '../../../../../../services/walk'

export default defineRoute(walkEndpoints.changeWalkStep, ({ event, studio, body, idParam }) => changeWalkStep(studio, idParam('bench'), walkStepParam(event), body))
