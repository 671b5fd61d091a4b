import { ComputeError } from '../errors'
import { bandsOf, simultaneousBands } from './bands'
import type { FieldParameters } from './covariance'
import type { ExpectedError } from './expected-error'
import { expectedError } from './expected-error'
import { flatFieldFit } from './flat-field-fit'
import { isotonic } from './isotonic'
import { minimise } from './nelder-mead'
import type { PrintSpread } from './print-spread'
import { greatestShifts, spreadOfPrints } from './print-spread'
import { seededRandom } from './random'
import type { Reversal } from './reversal'
import { findReversal, startingAt } from './reversal'
import type { WeighedCandidate } from './spline-average'
import { averageCurve, drawCurves } from './spline-average'
import type { WedgeModel } from './wedge-model'
import { wedgeModel } from './wedge-model'
import { soundPatches } from './wedge-outliers'
import { withSuspectsHeard } from './wedge-suspects'
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
  /** standard deviation from print to print, L* at the tone where it shows most, once three prints tell it */
  printSpread: number | null
}

/** Fewer sound patches than this carry no fields beside the tone. */
const leastPatches = 60
const start: FieldParameters = [0.5, 2.3, 2.3]
const firstSteps = [1.2, 0.7, 0.7]
const evaluations = 30
const drawCount = 400
/** Times that suspects are heard, each with the curve that the last ones gave. */
const hearings = 3
/**
 * Widening of the draws' standard deviation for both 95 % bands: the draws take the mottle's parameters and shape as known.
 * Measured by `npm run bench -- calibration` on two kinds of simulated prints.
 */
const bandSpread = 1.1

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
 * After 5 the suspects of step 1 are heard against all that is known by then, and those cleared come back (`wedge-suspects.ts`).
 *
 * Prints are pooled: each has fields of its own and, where there are several, its own exposure and coating (a stated prior).
 * The order of patches does not matter. Input is not changed.
 * @throws ComputeError `too_few_levels` for a print with fewer than 60 patches, `range_too_small` for one without tones.
 */
export function fitWedge(given: readonly WedgePrint[]): WedgeFit {
  if (given.length === 0 || given.some(print => print.length < leastPatches)) throw new ComputeError('too_few_levels', `A wedge print needs at least ${leastPatches} readable patches.`)
  const ordered = given.map(inPlaceOrder)
  const sound = soundPatches(ordered)
  let used = sound
  let mixture = searched(taken(ordered, used))
  for (let hearing = 0; hearing < hearings; hearing++) {
    const without = { response: curveOf(mixture), field: mixture.field, noise: noiseOf(mixture) }
    const heard = ordered.map((print, b) => withSuspectsHeard(print, sound[b]!, without))
    if (isSame(heard, used)) break
    used = heard
    mixture = modelled(taken(ordered, used), mixture.field)
  }
  const isUsed = new Set(taken(ordered, used).flat())
  return { ...finished(mixture, taken(ordered, used)), used: given.map(print => print.map(patch => isUsed.has(patch))) }
}

/** `fitWedge` from step 2 on: all patches are taken as sound, and as given. */
export function fitSoundPrints(prints: readonly WedgePrint[]): Omit<WedgeFit, 'used'> {
  return finished(searched(prints), prints)
}

/** A mixture of splines and the mottle it was found with. */
interface Mixture { weighed: WeighedCandidate[], grids: Float64Array[], field: FieldParameters }

const taken = (prints: readonly WedgePrint[], used: readonly boolean[][]): WedgePrint[] => prints.map((print, b) => print.filter((_, i) => used[b]![i]))
const isSame = (one: readonly boolean[][], other: readonly boolean[][]): boolean => one.every((list, b) => list.every((v, i) => v === other[b]![i]))

function searched(prints: readonly WedgePrint[]): Mixture {
  const model = startedModel(prints)
  const [variance, reachX, reachY] = minimise(([v, x, y]) => model.criterion([v!, x!, y!]), start, firstSteps, evaluations)
  const field: FieldParameters = [variance!, reachX!, reachY!]
  return { weighed: model.average(field), grids: model.grids, field }
}

function modelled(prints: readonly WedgePrint[], field: FieldParameters, spread?: PrintSpread): Mixture {
  const model = startedModel(prints, spread)
  return { weighed: model.average(field), grids: model.grids, field }
}

function startedModel(prints: readonly WedgePrint[], spread?: PrintSpread): WedgeModel {
  const { response: first, residuals } = flatFieldFit(prints)
  if (first.at(-1)! - first[0]! < 1) throw new ComputeError('range_too_small', 'The wedge print has no tones: its lightest patch is hardly lighter than its darkest.')
  return wedgeModel(prints, first, deviationOf(residuals), spread)
}

const rawOf = ({ weighed, grids }: Mixture): Float64Array => averageCurve(weighed, grids).map(l => Math.min(100, Math.max(0, l)))
const curveOf = (mixture: Mixture): Float64Array => isotonic(rawOf(mixture))
const noiseOf = ({ weighed }: Mixture): number => Math.sqrt(weighed.reduce((sum, { weight, candidate }) => sum + weight * candidate.variance, 0))

/** Step 6, once three prints or more have told how they differ. */
function finished(first: Mixture, prints: readonly WedgePrint[]): Omit<WedgeFit, 'used'> {
  const { spread, told } = spreadOfPrints(prints, curveOf(first))
  const mixture = told ? modelled(prints, first.field, spread) : first
  const raw = rawOf(mixture)
  const draws = drawCurves(mixture.weighed, mixture.grids, drawCount, bandSpread, seededRandom(1))
  const reversal = findReversal(raw, draws)
  const guarded = (values: Float64Array): Float64Array => isotonic(reversal ? startingAt(values, reversal.level) : values)
  const [response, monotone] = [guarded(raw), draws.map(guarded)]
  const { low: lowOfAll, high: highOfAll } = simultaneousBands(response, draws)
  return {
    response, ...bandsOf(response, draws), lowOfAll, highOfAll, reversal,
    expectedError: expectedError(response, monotone, { prints: prints.length, spread, drawsHoldSpread: prints.length > 1 }),
    printSpread: told ? Math.hypot(...Object.values(greatestShifts(response, spread))) : null,
    noise: noiseOf(mixture), field: mixture.field,
  }
}

function deviationOf(residuals: readonly Float64Array[]): number {
  let [square, count] = [0, 0]
  for (const list of residuals) for (const r of list) [square, count] = [square + r * r, count + 1]
  return Math.max(0.05, Math.sqrt(square / count))
}
