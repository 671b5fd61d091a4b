import { cubicBasis, differencePenalty } from './bspline'
import { isotonic } from './isotonic'
import { monomials } from './monomials'
import { averageCurve } from './spline-average'
import type { SplineCandidate } from './spline-candidates'
import { bestFit, penaltyOrder } from './spline-candidates'
import { firstFit, levelGrid, splineCount } from './smooth-fit'
import { responsePoints, valueAt } from '../tone/response'
import type { WedgePrint } from './wedge-print'

/** Fields of the flat field: x, y, x², xy, y². */
const fieldCount = 5

/** A first fit: the response at 1025 levels, never falling, and each print's residuals with its flat field taken off. */
export interface FlatFieldFit { response: Float64Array, residuals: Float64Array[] }

/**
 * Step 1 of the wedge fit: one P-spline for all prints and for each print a quadratic flat field times a tone weight that is
 * least near white and small at black; smoothing by restricted likelihood.
 */
export function flatFieldFit(prints: readonly WedgePrint[]): FlatFieldFit {
  const patches = prints.flat()
  const plain = firstFit([...patches].sort((a, b) => a.level - b.level || a.lightness - b.lightness))
  const columns = splineCount + fieldCount * prints.length
  const design = designMatrix(prints, plain, columns)
  const best = bestFit(design, Float64Array.from(patches, p => p.lightness), penaltyOf(columns), splineCount)
  const response = isotonic(averageCurve([{ candidate: splinePart(best), weight: 1 }], [cubicBasis(levelGrid, splineCount)]))
  const residuals = patches.map((patch, row) => patch.lightness - rowTimes(design, row, best.coefficients))
  let start = 0
  return { response, residuals: prints.map(print => Float64Array.from(residuals.slice(start, start += print.length))) }
}

const splinePart = (fit: SplineCandidate): SplineCandidate => ({ ...fit, coefficients: fit.coefficients.slice(0, splineCount) })

function rowTimes(design: Float64Array, row: number, coefficients: Float64Array): number {
  const columns = coefficients.length
  let sum = 0
  for (let k = 0; k < columns; k++) sum += design[row * columns + k]! * coefficients[k]!
  return sum
}

function designMatrix(prints: readonly WedgePrint[], plain: Float64Array, columns: number): Float64Array {
  const patches = prints.flat()
  const design = new Float64Array(patches.length * columns)
  const splines = cubicBasis(patches.map(p => p.level), splineCount)
  let row = 0
  prints.forEach((print, which) => {
    const fields = centredFields(print)
    print.forEach((patch, i) => {
      design.set(splines.subarray(row * splineCount, (row + 1) * splineCount), row * columns)
      const weight = toneWeight(plain, patch.level)
      for (let k = 0; k < fieldCount; k++) design[row * columns + splineCount + which * fieldCount + k] = weight * fields[i * fieldCount + k]!
      row++
    })
  })
  return design
}

function centredFields(print: WedgePrint): Float64Array {
  const fields = monomials(print, 2)
  const means = Array.from({ length: fieldCount }, (_, k) => print.reduce((sum, _, i) => sum + fields[i * fieldCount + k]!, 0) / print.length)
  return fields.map((v, at) => v - means[at % fieldCount]!)
}

/** How much of a field shows at a tone: least at white, a third less than full at black. An assumption for the first fit alone. */
function toneWeight(plain: Float64Array, level: number): number {
  const [black, white] = [plain[0]!, plain[responsePoints - 1]!]
  const s = white > black ? (valueAt(plain, level) - black) / (white - black) : 0.5
  return Math.min(1, Math.max(0, 1.15 - s)) * Math.min(1, Math.max(0, 0.35 + 2 * s)) + 0.15
}

function penaltyOf(columns: number): Float64Array {
  const splines = differencePenalty(splineCount, penaltyOrder)
  const penalty = new Float64Array(columns * columns)
  for (let i = 0; i < splineCount; i++) penalty.set(splines.subarray(i * splineCount, (i + 1) * splineCount), i * columns)
  return penalty
}
