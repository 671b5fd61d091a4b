import { averageOf } from './spline-average'
import type { PrintSpread } from './print-spread'
import { assumedSpread, lightnessShift } from './print-spread'
import { seededRandom } from './random'

/** L*: the greatest error over all tones, half of the times below `median`, 19 of 20 times below `p95`. */
export interface ErrorFigures { median: number, p95: number }
export interface ExpectedError { nextPrint: ErrorFigures, curve: ErrorFigures, nextPrintWithOneMore: ErrorFigures }

/** What the curve rests on: how many wedge prints, how they differ, and whether the draws already hold that difference. */
export interface ErrorBasis { prints: number, spread?: PrintSpread, drawsHoldSpread?: boolean }

/** Every so many of the 1025 levels is looked at. */
const stride = 4
/** Shifts this large are worked out, more and less; others are taken in proportion. */
const step: PrintSpread = { exposure: 0.02, coating: 0.02 }

/**
 * What errors to expect, max |ΔL*| over all tones.
 *
 * - `curve`: of the curve itself, from the fit's draws.
 * - `nextPrint`: of the next print made with it. To the curve's error come the next print's own exposure and coating, and the
 *   wedge prints' that the curve rests on: √(1 + 1/prints) times the print-to-print spread, which shrinks slowly and not below
 *   the spread itself. Where the draws hold the prints' share already, the spread alone.
 * - `nextPrintWithOneMore`: the same with one wedge print more, what parts prints and patches averaging out by the root law.
 */
export function expectedError(curve: Float64Array, draws: readonly Float64Array[], { prints, spread = assumedSpread, drawsHoldSpread = false }: ErrorBasis): ExpectedError {
  const random = seededRandom(2)
  const shifts = shiftTables(curve)
  const mean = averageOf(draws)
  // Each shift both ways, so that chance does not tie it to its draw.
  const trials = draws.flatMap((draw) => {
    const [exposure, coating] = [random.normal() * spread.exposure, random.normal() * spread.coating]
    return [{ draw, exposure, coating }, { draw, exposure: -exposure, coating: -coating }]
  })
  const errors = (nearness: number, ownPrints: number): ErrorFigures => figures(trials.map(({ draw, exposure, coating }) =>
    greatest(curve.length, i => mean[i]! - curve[i]! + nearness * (draw[i]! - mean[i]!) + shifts(i, ownPrints * exposure, ownPrints * coating))))
  const own = (count: number): number => drawsHoldSpread ? 1 : Math.sqrt(1 + 1 / count)
  return {
    curve: errors(1, 0),
    nextPrint: errors(1, own(prints)),
    nextPrintWithOneMore: errors(Math.sqrt(prints / (prints + 1)), own(prints + 1)),
  }
}

/** How far a level's lightness moves with exposure and coating. */
function shiftTables(curve: Float64Array): (i: number, exposure: number, coating: number) => number {
  const more = { exposure: lightnessShift(curve, step.exposure, 0), coating: lightnessShift(curve, 0, step.coating) }
  const less = { exposure: lightnessShift(curve, -step.exposure, 0), coating: lightnessShift(curve, 0, -step.coating) }
  const read = (kind: 'exposure' | 'coating', i: number, amount: number): number => (amount > 0 ? more : less)[kind][i]! * Math.abs(amount) / step[kind]
  return (i, exposure, coating) => read('exposure', i, exposure) + read('coating', i, coating)
}

function greatest(length: number, error: (i: number) => number): number {
  let most = 0
  for (let i = 0; i < length; i += stride) most = Math.max(most, Math.abs(error(i)))
  return most
}

function figures(errors: readonly number[]): ErrorFigures {
  const sorted = [...errors].sort((a, b) => a - b)
  const quantile = (share: number): number => sorted[Math.min(sorted.length - 1, Math.floor(share * sorted.length))]!
  return { median: quantile(0.5), p95: quantile(0.95) }
}
