import { ComputeError } from '../errors'
import { bandsOf } from './bands'
import type { FieldParameters } from './covariance'
import type { ExpectedError } from './expected-error'
import { expectedError } from './expected-error'
import { flatFieldFit } from './flat-field-fit'
import { isotonic } from './isotonic'
import { minimise } from './nelder-mead'
import { seededRandom } from './random'
import type { Reversal } from './reversal'
import { findReversal } from './reversal'
import type { WeighedCandidate } from './spline-average'
import { averageCurve, drawCurves } from './spline-average'
import { wedgeModel } from './wedge-model'
import { soundPatches } from './wedge-outliers'
import type { WedgePrint } from './wedge-print'
import { inPlaceOrder } from './wedge-print'

export interface WedgeFit {
  /** print lightness L* at 1025 equal steps of ink level, never falling */
  response: Float64Array
  /** pointwise 95 % band */
  low: Float64Array
  high: Float64Array
  /** 95 % band that holds for all levels at once */
  lowOfAll: Float64Array
  highOfAll: Float64Array
  /** for each print, for each patch as given: whether it was used */
  used: boolean[][]
  reversal: Reversal | null
  expectedError: ExpectedError
  /** logarithms of the mottle's variance over the noise's and of its reach in mm */
  field: FieldParameters
  /** standard deviation of a patch's own noise, L* */
  noise: number
}

/** Fewer sound patches than this carry no fields beside the tone. */
const leastPatches = 60
const start: FieldParameters = [0.5, 2.3, 2.3]
const firstSteps = [1.2, 0.7, 0.7]
const evaluations = 30
const drawCount = 300
/**
 * Widening of the draws' standard deviation for 95 % bands: pointwise, and for all levels at once. On 200 simulated typical
 * prints the first held 98 % (too wide) and the second 87 % (too narrow): the draws know too little of single, steep systems.
 */
const pointwiseSpread = 1.2
const simultaneousSpread = 1.4

/**
 * The response of a bench from one or more prints of scattered wedges, robust and honest about its uncertainty.
 *
 * 1. first fit with a quadratic flat field; spoiled patches dropped (`flat-field-fit.ts`, `wedge-outliers.ts`);
 * 2. tone weights from the first fit (`tone-weights.ts`);
 * 3. covariance of the patches from noise, smooth fields and mottle; everything whitened by its Cholesky factor;
 * 4. P-splines on four warped axes with 27 smoothing weights each (`spline-candidates.ts`);
 * 5. the mottle's parameters by Nelder–Mead on the candidates' joint restricted likelihood with wide priors;
 * 6. the candidates' average, an isotonic guard, bands from draws.
 *
 * Prints are pooled: each has fields of its own and, where there are several, its own exposure and coating (a stated prior).
 * The order of patches does not matter. Input is not changed.
 * @throws ComputeError `too_few_levels` for a print with fewer than 60 patches, `range_too_small` for one without tones.
 */
export function fitWedge(given: readonly WedgePrint[]): WedgeFit {
  if (given.length === 0 || given.some(print => print.length < leastPatches)) throw new ComputeError('too_few_levels', `A wedge print needs at least ${leastPatches} readable patches.`)
  const ordered = given.map(inPlaceOrder)
  const sound = soundPatches(ordered)
  const kept = ordered.map((print, b) => print.filter((_, i) => sound[b]![i]))
  const isUsed = new Set(kept.flat())
  return { ...fitSoundPrints(kept), used: given.map(print => print.map(patch => isUsed.has(patch))) }
}

/** `fitWedge` from step 2 on: all patches are taken as sound, and as given. */
export function fitSoundPrints(prints: readonly WedgePrint[]): Omit<WedgeFit, 'used'> {
  const { response: first, residuals } = flatFieldFit(prints)
  if (first.at(-1)! - first[0]! < 1) throw new ComputeError('range_too_small', 'The wedge print has no tones: its lightest patch is hardly lighter than its darkest.')
  const model = wedgeModel(prints, first, deviationOf(residuals))
  const [variance, reachX, reachY] = minimise(([v, x, y]) => model.criterion([v!, x!, y!]), start, firstSteps, evaluations)
  const field: FieldParameters = [variance!, reachX!, reachY!]
  return { ...finished(model.average(field), model.grids, prints.length), field }
}

function finished(weighed: readonly WeighedCandidate[], grids: readonly Float64Array[], prints: number) {
  const raw = averageCurve(weighed, grids)
  const draws = drawCurves(weighed, grids, drawCount, 1, seededRandom(1))
  const response = isotonic(raw.map(l => Math.min(100, Math.max(0, l))))
  const pointwise = bandsOf(response, draws, pointwiseSpread)
  const simultaneous = bandsOf(response, draws, simultaneousSpread)
  const monotone = draws.map(draw => isotonic(draw.map((v, i) => raw[i]! + simultaneousSpread * (v - raw[i]!))))
  return {
    response, ...pointwise, lowOfAll: simultaneous.low, highOfAll: simultaneous.high,
    reversal: findReversal(raw, draws),
    // Several prints carry their own spread into the draws already.
    expectedError: expectedError(response, monotone, prints === 1 ? Math.SQRT2 : 1),
    noise: Math.sqrt(weighed.reduce((sum, { weight, candidate }) => sum + weight * candidate.variance, 0)),
  }
}

function deviationOf(residuals: readonly Float64Array[]): number {
  let [square, count] = [0, 0]
  for (const list of residuals) for (const r of list) [square, count] = [square + r * r, count + 1]
  return Math.max(0.05, Math.sqrt(square / count))
}
