import type { Warning } from '../schemas/curves'
import { ComputeError } from '../errors'
import { densityFromLightness, lightnessFromDensity } from '../tone/density'
import type { StripCurve } from './strip-posterior'
import { stripPosterior } from './strip-posterior'

export interface ExposureValue { exposureSeconds: number, lightness: number }

/**
 * What the base exposure is the shortest for.
 * - `full-black`: within 1 L* of the paper's black through clear film.
 * - `layer-survives` (gum): the full-exposure patch keeps `share` of its layer's density through the chosen development.
 * - `chosen-density` (printing-out salt): an absolute density, after fixing and drying.
 */
export type ExposureGoal = { kind: 'full-black' } | { kind: 'layer-survives', share?: number } | { kind: 'chosen-density', density: number }

export interface BaseExposure {
  exposureSeconds: number
  /** 95 % of what the strip allows; `High` is null where it may never be reached */
  exposureSecondsLow: number
  exposureSecondsHigh: number | null
  /** black of the paper through clear film as fitted, L* */
  blackLightness: number
  /** the strip as fitted, from its shortest exposure to its longest or the base exposure, evenly in log exposure */
  line: ExposureValue[]
  warnings: Warning[]
}

/** L* from the black that still counts as black. */
const blackWithin = 1
/** Of the layer's density; common practice, no source. */
const survivingShare = 0.9
const leastExposures = 5
/** Widening of the bounds about the estimate: neighbouring steps share their unevenness, so without it 95 % held 87 % of simulated strips. */
const boundsSpread = 1.3
/** A strip of less range than this has no curve in it, L*. */
const leastRange = 5

/**
 * The base exposure from an exposure strip through clear film, by the posterior mean of its logarithm (`stripPosterior`), with
 * the 95 % that the strip allows. Values in any order; a repeated strip simply adds values. Where the strip ends before
 * or begins after the base exposure a warning says so: the figure is then a guess beyond what was seen.
 * @throws ComputeError `too_few_levels` under 5 different exposures, `range_too_small` under 5 L* or where the goal is not
 * reached, `levels_unrelated` when the print gets lighter with more exposure, `invalid_input` for values that are none.
 */
export function findBaseExposure(values: readonly ExposureValue[], goal: ExposureGoal = { kind: 'full-black' }): BaseExposure {
  requireStrip(values)
  const curves = stripPosterior(values.map(({ exposureSeconds, lightness }) => ({ logExposure: Math.log10(exposureSeconds), density: densityFromLightness(Math.max(1, lightness)) })))
  const reached = curves.map(curve => ({ logExposure: logExposureFor(curve, goal), weight: curve.weight })).sort((a, b) => a.logExposure - b.logExposure)
  const never = reached.reduce((sum, r) => Number.isFinite(r.logExposure) ? sum : sum + r.weight, 0)
  if (never > 0.5) throw new ComputeError('range_too_small', 'This strip never gets as dark as is asked for. Expose a longer strip, or ask for less.')
  const finite = reached.filter(r => Number.isFinite(r.logExposure))
  const log = finite.reduce((sum, r) => sum + r.weight * r.logExposure, 0) / (1 - never)
  const [low, high] = [quantile(reached, 0.025), quantile(reached, 0.975)].map(bound => log + boundsSpread * (bound - log)) as [number, number]
  const seconds = values.map(v => v.exposureSeconds)
  return {
    exposureSeconds: 10 ** log, exposureSecondsLow: Math.min(10 ** log, 10 ** low), exposureSecondsHigh: Number.isFinite(high) ? Math.max(10 ** log, 10 ** high) : null,
    blackLightness: lightnessFromDensity(curves.reduce((sum, c) => sum + c.weight * c.deepest, 0)),
    line: lineThrough(curves, [...seconds.map(Math.log10), log]),
    warnings: endWarnings(log, high, Math.log10(Math.min(...seconds)), Math.log10(Math.max(...seconds))),
  }
}

/** log₁₀ of the exposure at which a curve reaches the goal; infinite where it never does. */
function logExposureFor({ curve, x0, slope, shape, deepest, paper }: StripCurve, goal: ExposureGoal): number {
  const wanted = goal.kind === 'full-black' ? densityFromLightness(lightnessFromDensity(Math.min(5, Math.max(0, deepest))) + blackWithin)
    : goal.kind === 'chosen-density' ? goal.density : paper + (goal.share ?? survivingShare) * (deepest - paper)
  const share = (wanted - paper) / (deepest - paper)
  if (!(share < 1)) return Infinity
  return share > 0 ? x0 + curve.position(share, shape) / slope : -Infinity
}

const linePlaces = 61

/** The mean of the curves that the strip allows, over the range of these logarithms. */
function lineThrough(curves: readonly StripCurve[], logs: readonly number[]): ExposureValue[] {
  const [from, to] = [Math.min(...logs), Math.max(...logs)]
  return Array.from({ length: linePlaces }, (_, i) => {
    const log = from + (to - from) * i / (linePlaces - 1)
    const density = curves.reduce((sum, { curve, x0, slope, shape, deepest, paper, weight }) => sum + weight * (paper + (deepest - paper) * curve.share(slope * (log - x0), shape)), 0)
    return { exposureSeconds: 10 ** log, lightness: lightnessFromDensity(density) }
  })
}

function quantile(sorted: readonly { logExposure: number, weight: number }[], share: number): number {
  let sum = 0
  for (const { logExposure, weight } of sorted) if ((sum += weight) >= share) return logExposure
  return sorted.at(-1)!.logExposure
}

function endWarnings(log: number, high: number, shortest: number, longest: number): Warning[] {
  const seconds = (value: number): string => `${Math.round(10 ** value)} s`
  if (log > longest) return [{ code: 'strip_ends_too_soon', message: `The strip ends at ${seconds(longest)}, before the paper is as dark as it gets: ${seconds(log)} is a guess. Print another strip that goes on to about ${seconds(log + 0.45)}.` }]
  if (log < shortest) return [{ code: 'strip_starts_too_late', message: `Even the shortest time, ${seconds(shortest)}, is long enough: the base exposure lies below it and ${seconds(log)} is a guess. Print another strip that starts at about ${seconds(log - 0.9)}.` }]
  if (!(high <= longest)) return [{ code: 'strip_ends_early', message: `The strip ends at ${seconds(longest)}, near the base exposure: the upper bound is a guess. A strip that goes on for another stop tells more.` }]
  return []
}

function requireStrip(values: readonly ExposureValue[]): void {
  values.forEach(({ exposureSeconds, lightness }, i) => {
    if (!(exposureSeconds > 0 && exposureSeconds <= 1e6)) throw new ComputeError('invalid_input', `Value ${i + 1}: an exposure is more than 0 and at most a million seconds.`, [{ path: `values.${i}.exposureSeconds`, message: 'Out of range.' }])
    if (!(lightness >= 0 && lightness <= 100)) throw new ComputeError('invalid_input', `Value ${i + 1}: a lightness lies between 0 and 100.`, [{ path: `values.${i}.lightness`, message: 'Out of range.' }])
  })
  const exposures = [...new Set(values.map(v => v.exposureSeconds))].sort((a, b) => a - b)
  if (exposures.length < leastExposures) throw new ComputeError('too_few_levels', `A strip needs at least ${leastExposures} different exposures; these are ${exposures.length}.`)
  const lightnesses = values.map(v => v.lightness)
  if (Math.max(...lightnesses) - Math.min(...lightnesses) < leastRange) throw new ComputeError('range_too_small', lightnesses[0]! < 50
    ? `All steps of this strip are nearly as dark as one another (less than ${leastRange} L* apart): even the shortest time was long. Print a strip that starts about four stops lower.`
    : `No step of this strip got dark (less than ${leastRange} L* apart). Print a strip that goes on about four stops further.`)
  const meanAt = (seconds: number): number => {
    const at = values.filter(v => v.exposureSeconds === seconds)
    return at.reduce((sum, v) => sum + v.lightness, 0) / at.length
  }
  if (meanAt(exposures.at(-1)!) > meanAt(exposures[0]!)) throw new ComputeError('levels_unrelated', 'The print gets lighter with more exposure. Check that each lightness stands beside its own time.')
}
