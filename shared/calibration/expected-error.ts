import { densityFromLightness, lightnessFromDensity } from '../tone/density'
import { seededRandom } from './random'

/** L*: the greatest error over all tones, half of the times below `median`, 19 of 20 times below `p95`. */
export interface ErrorFigures { median: number, p95: number }
export interface ExpectedError { nextPrint: ErrorFigures, curve: ErrorFigures }

/** Print-to-print spread until three prints tell it; assumptions of ours, no source. Log exposure, and share of the coating. */
export const assumedExposureSpread = 0.02
export const assumedCoatingSpread = 0.01
/** Slope of the print's logistic in log exposure, taken from an exposure scale of 1.8 between 1 % and 99 %; an assumption. */
const assumedSlope = 2 * Math.log(99) / 1.8
/** Every so many of the 1025 levels is looked at. */
const stride = 4

/**
 * What errors to expect, max |ΔL*| over all tones. `curve`: of the curve itself, from the fit's draws. `nextPrint`: of the
 * next print made with it; to the curve's error comes `spread` times the print-to-print spread, a stated prior of 0.02 log H in
 * exposure and 1 % in coating (both normal). `spread` is √(1 + 1/prints), since the prints read had theirs too; 1 where
 * the draws hold that already.
 */
export function expectedError(curve: Float64Array, draws: readonly Float64Array[], spread: number): ExpectedError {
  const random = seededRandom(2)
  const shift = shiftOf(curve)
  const ofCurve = draws.map(draw => greatest(curve, draw, () => 0))
  const ofNext = draws.map((draw) => {
    const [exposure, coating] = [random.normal() * spread * assumedExposureSpread, random.normal() * spread * assumedCoatingSpread]
    return greatest(curve, draw, i => shift(i, exposure, coating))
  })
  return { curve: figures(ofCurve), nextPrint: figures(ofNext) }
}

/** How far one level's lightness moves with a change of log exposure and of coating, on a print of logistic response. */
function shiftOf(curve: Float64Array): (i: number, exposure: number, coating: number) => number {
  const densities = curve.map(l => densityFromLightness(Math.max(l, 1)))
  const paper = densities.at(-1)!
  const range = densities[0]! - paper
  return (i, exposure, coating) => {
    const net = densities[i]! - paper
    const moved = assumedSlope * net * (1 - net / range) * exposure + net * coating
    return lightnessFromDensity(Math.min(6, Math.max(-1, densities[i]! + moved))) - curve[i]!
  }
}

/** Standard deviations of lightness, L*, by the stated spread at the tones where each shows most. */
export function shiftDeviations(curve: Float64Array): { exposure: number, coating: number } {
  const shift = shiftOf(curve)
  const most = (exposure: number, coating: number): number => curve.reduce((max, _, i) => Math.max(max, Math.abs(shift(i, exposure, coating))), 0)
  return { exposure: most(assumedExposureSpread, 0), coating: most(0, assumedCoatingSpread) }
}

function greatest(curve: Float64Array, draw: Float64Array, shift: (i: number) => number): number {
  let most = 0
  for (let i = 0; i < curve.length; i += stride) most = Math.max(most, Math.abs(draw[i]! - curve[i]! + shift(i)))
  return most
}

function figures(errors: readonly number[]): ErrorFigures {
  const sorted = [...errors].sort((a, b) => a - b)
  const quantile = (share: number): number => sorted[Math.min(sorted.length - 1, Math.floor(share * sorted.length))]!
  return { median: quantile(0.5), p95: quantile(0.95) }
}
