import { accountCases } from './routes/account'
import { benchCases } from './routes/benches'
import { calibrationCases } from './routes/calibration'
import { classCases } from './routes/classes'
import { curveCases } from './routes/curves'
import { negativeCases } from './routes/negatives'
import { passkeyCases } from './routes/passkeys'
import { peopleCases } from './routes/people'
import { photoCases } from './routes/photos'
import type { RouteCase } from './routes/route-case'
import { scanCases } from './routes/scans'
import { serviceCases } from './routes/service'
import { shelfCases } from './routes/shelf'
import { uploadCases } from './routes/uploads'
import { walkCases } from './routes/walk'
import { wedgeCases } from './routes/wedges'

/** Every handler of the service, each with a good call of it. What must be refused follows from the contract, or is named. */
export const routeTable: RouteCase[] = [...serviceCases, ...peopleCases, ...accountCases, ...passkeyCases, ...shelfCases, ...benchCases, ...curveCases, ...calibrationCases, ...scanCases, ...walkCases, ...photoCases, ...uploadCases, ...negativeCases, ...classCases, ...wedgeCases]
