import type { Warning } from '../schemas/curves'
import { ComputeError } from '../errors'
import { responsePoints } from '../tone/response'
import { bandsOf } from './bands'
import type { ExpectedError } from './expected-error'
import { expectedError } from './expected-error'
import { fitFewLevels } from './few-levels'
import { isotonic } from './isotonic'
import { averageByLevel } from './levels'
import { leastLevels } from './measurement-checks'
import { dropOutliers } from './outliers'
import { fitSmooth } from './smooth-fit'

export interface ResponsePoint { level: number, lightness: number }

/** What a fit leaves undecided, as curves that could as well be the true one. */
export interface FittedCurve { curve: Float64Array, draws: Float64Array[] }

export interface ResponseFit {
  /** print lightness L* at 1025 equal steps of ink level, never falling */
  response: number[]
  /** pointwise 95 % band about it, same positions, never falling */
  low: number[]
  high: number[]
  blackLightness: number
  whiteLightness: number
  /** 'spline' from 7 levels on, else 'isotonic' */
  method: 'spline' | 'isotonic'
  /** for each point as given: whether the fit used it */
  used: boolean[]
  expectedError: ExpectedError
  warnings: Warning[]
}

/** From so many different levels on, the spline was the better fit of simulated systems (7: median 0.7 against 1.3 L*). */
const leastSplineLevels = 7
/** A print without so much lightness range, L*, has no tones to spread. */
const leastRange = 1
/** Curves drawn for bands and expected errors. */
const drawCount = 400

/**
 * The response of a bench from patches without positions: levels 0 … 1 with the print's lightness L*, in any order.
 *
 * From 7 levels on: penalised cubic B-splines on axes warped after a first fit, averaged over warp and smoothing by
 * restricted likelihood; spoiled patches are dropped first (see `outliers.ts`). Under 7: isotonic regression and PCHIP.
 * Both end with an isotonic guard; outside the measured levels the last value is held. `prints` says how many wedge prints
 * the points come from. Input is not changed; the order of points does not matter, to the last bit.
 * @throws ComputeError `too_few_levels` under 5 levels, `invalid_input` for values that are no numbers, `range_too_small`.
 */
export function fitResponse(points: readonly ResponsePoint[], { prints = 1 }: { prints?: number } = {}): ResponseFit {
  requirePoints(points)
  const method = averageByLevel(points).length < leastSplineLevels ? 'isotonic' : 'spline'
  const used = method === 'spline' ? dropOutliers(points) : points.map(() => true)
  const kept = points.filter((_, i) => used[i])
  const levels = averageByLevel(kept)
  const { curve, draws } = method === 'spline' ? fitSmooth(kept, drawCount) : fitFewLevels(levels, drawCount)
  const [from, to] = [levels[0]!.level, levels.at(-1)!.level]
  const finish = (values: Float64Array): Float64Array => guarded(values, from, to)
  const response = finish(curve)
  if (response[responsePoints - 1]! - response[0]! < leastRange) throw new ComputeError('range_too_small', 'The fitted lightness does not rise from clear film to full ink.')
  const finished = draws.map(finish)
  const { low, high } = bandsOf(response, finished)
  return {
    response: [...response], low: [...low], high: [...high], method, used,
    blackLightness: response[0]!, whiteLightness: response[responsePoints - 1]!,
    expectedError: expectedError(response, finished, { prints }),
    warnings: warningsOf(used, method),
  }
}

/** Held outside the measured levels, never falling, inside 0 … 100. */
function guarded(values: Float64Array, fromLevel: number, toLevel: number): Float64Array {
  const last = responsePoints - 1
  const [from, to] = [Math.ceil(fromLevel * last - 1e-6), Math.floor(toLevel * last + 1e-6)]
  const held = values.map((_, i) => Math.min(100, Math.max(0, values[Math.min(to, Math.max(from, i))]!)))
  return isotonic(held)
}

function requirePoints(points: readonly ResponsePoint[]): void {
  for (const [i, { level, lightness }] of points.entries()) {
    if (!(level >= 0 && level <= 1)) throw new ComputeError('invalid_input', `Point ${i + 1}: a level lies between 0 and 1.`)
    if (!(lightness >= 0 && lightness <= 100)) throw new ComputeError('invalid_input', `Point ${i + 1}: a lightness lies between 0 and 100.`)
  }
  const count = averageByLevel(points).length
  if (count < leastLevels) throw new ComputeError('too_few_levels', `A curve needs at least ${leastLevels} different ink levels; these are ${count}.`)
}

function warningsOf(used: readonly boolean[], method: ResponseFit['method']): Warning[] {
  const dropped = used.filter(u => !u).length
  const warnings: Warning[] = []
  if (dropped > 0) warnings.push({ code: 'patches_dropped', message: `${dropped} of ${used.length} patches lie far off their neighbours and were left out.` })
  if (method === 'isotonic') warnings.push({ code: 'few_levels', message: `With fewer than ${leastSplineLevels} levels the curve only joins the measured tones; its error cannot be told from the reading.` })
  return warnings
}
