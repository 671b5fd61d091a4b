import type { Warning } from '../schemas/curves'
import { ComputeError } from '../errors'
import { densityFromLightness, lightnessFromDensity } from '../tone/density'
import { isotonic } from './isotonic'
import { pchip } from './pchip'

/** A step of a contact-printed tablet: the tablet's own (UV transmission) density and the print's lightness behind it. */
export interface TabletStep { density: number, lightness: number }

/** Steps of a nominal tablet: 0.05, then 0.15 more each. Common practice, no source; calibrated densities are better. */
export const nominalTablet = (steps = 21): number[] => Array.from({ length: steps }, (_, i) => 0.05 + 0.15 * i)

/**
 * Which 90 % the upper point means: of the density range above the paper (net), or of the greatest density as read with
 * the paper in it. They differ by a tenth of the paper's density.
 */
export type NinetyPercentOf = 'net-density' | 'density-as-read'

export interface TabletPrint {
  /** log₁₀ exposure from the first tone (0.04 above paper) to the 90 % point; null where the tablet does not reach both */
  exposureScale: number | null
  /** ISO 6846's range of log exposure in hundredths: R = 100 · (log H_S − log H_T), not rounded */
  isoRange: number | null
  ninetyPercentOf: NinetyPercentOf
  /** log₁₀ exposure behind the tablet's density 0 that each point takes less; a density of the tablet */
  toneBeginsDensity: number | null
  ninetyPercentDensity: number | null
  /** tablet density behind which the print is still within 1 L* of its black */
  fullBlackDensity: number | null
  paperDensity: number
  maxDensity: number
  warnings: Warning[]
}

export interface TabletOptions {
  ninetyPercentOf?: NinetyPercentOf
  /** absolute densities of paper and black where known; else the lightest and the darkest step's */
  paperDensity?: number
  maxDensity?: number
}

/** ISO 6846:1992: T lies 0.04 above the paper; S at 90 % (see `NinetyPercentOf`). */
const firstToneAbovePaper = 0.04
const upperShare = 0.9
const blackWithin = 1
const leastSteps = 5

/**
 * Exposure scale and paper range by the points of ISO 6846:1992 (the clause was not at hand: the result says which 90 % it
 * means), between isotonic means of the steps by PCHIP. Steps in any order; equal densities are averaged. Exposures are
 * relative, so ratios hold for UV but the standard's speed does not.
 * @throws ComputeError `too_few_levels` under 5 densities, `range_too_small` under 0.15 of print density.
 */
export function readTablet(steps: readonly TabletStep[], options: TabletOptions = {}): TabletPrint {
  const curve = tabletCurve(steps)
  const paperDensity = options.paperDensity ?? Math.min(...curve.prints)
  const maxDensity = options.maxDensity ?? Math.max(...curve.prints)
  if (maxDensity - paperDensity < 0.15) throw new ComputeError('range_too_small', 'The steps of this print hardly differ. Expose the tablet so that its first steps are black and its last are paper white.')
  const ninetyPercentOf = options.ninetyPercentOf ?? 'net-density'
  const upper = ninetyPercentOf === 'net-density' ? paperDensity + upperShare * (maxDensity - paperDensity) : upperShare * maxDensity
  const [t, s] = [curve.logExposureFor(paperDensity + firstToneAbovePaper), curve.logExposureFor(upper)]
  const black = curve.logExposureFor(densityFromLightness(lightnessFromDensity(maxDensity) + blackWithin))
  const scale = t !== null && s !== null ? s - t : null
  return {
    exposureScale: scale, isoRange: scale === null ? null : 100 * scale, ninetyPercentOf,
    toneBeginsDensity: negated(t), ninetyPercentDensity: negated(s), fullBlackDensity: negated(black),
    paperDensity, maxDensity, warnings: tabletWarnings(curve, paperDensity),
  }
}

/** Which 90 % a range means, in a sentence for the screen. */
export const ninetyPercentSays: Record<NinetyPercentOf, string> = {
  'net-density': 'From 0.04 above the paper to 90 % of the density range above the paper (points of ISO 6846:1992; exposures relative).',
  'density-as-read': 'From 0.04 above the paper to 90 % of the greatest density as read, paper included (points of ISO 6846:1992; exposures relative).',
}

export interface TargetStep {
  /** number of the step, 1 first, that is the last full black at the base exposure */
  step: number
  density: number
  /** log₁₀ of exposure in hand before that step would no longer be full black */
  spare: number
}

/**
 * The step to expose for where time does not tell (dose, sun): "until this step is the last that is fully dark". The tablet was
 * printed with `exposure`; at `baseExposure` (same unit) all moves by the logarithm of their ratio. `densities` are the
 * tablet's, in the order of its numbers. Null when not even its thinnest step gets full black then.
 */
export function targetStep(print: TabletPrint, densities: readonly number[], exposure: number, baseExposure: number): TargetStep | null {
  if (print.fullBlackDensity === null) return null
  const reach = print.fullBlackDensity + Math.log10(baseExposure / exposure)
  const dark = densities.map((density, i) => ({ density, step: i + 1 })).filter(({ density }) => density <= reach + 1e-9)
  if (dark.length === 0) return null
  const last = dark.reduce((a, b) => b.density > a.density ? b : a)
  return { ...last, spare: reach - last.density }
}

const negated = (value: number | null): number | null => value === null ? null : 0 - value

interface TabletCurve { logExposures: number[], prints: number[], logExposureFor: (density: number) => number | null }

/** Print density along log exposure, −density of the tablet; never falling. */
function tabletCurve(steps: readonly TabletStep[]): TabletCurve {
  const groups = new Map<number, number[]>()
  for (const { density, lightness } of steps) {
    if (!(density >= 0 && density <= 6) || !(lightness > 0 && lightness <= 100)) throw new ComputeError('invalid_input', 'A tablet step has a density from 0 to 6 and a lightness up to 100.')
    groups.set(density, [...groups.get(density) ?? [], densityFromLightness(lightness)])
  }
  if (groups.size < leastSteps) throw new ComputeError('too_few_levels', `A tablet needs at least ${leastSteps} different steps; these are ${groups.size}.`)
  const sorted = [...groups].sort(([a], [b]) => b - a)
  const logExposures = sorted.map(([density]) => 0 - density)
  const means = sorted.map(([, values]) => values.reduce((a, b) => a + b, 0) / values.length)
  const prints = [...isotonic(means, sorted.map(([, values]) => values.length))]
  const interpolant = pchip(logExposures, prints)
  return { logExposures, prints, logExposureFor: density => whereReached(interpolant, logExposures[0]!, logExposures.at(-1)!, density) }
}

/** Least position at which a never-falling function reaches a value, by halving; null outside what it reaches. */
function whereReached(rising: (x: number) => number, from: number, to: number, value: number): number | null {
  if (rising(from) >= value || rising(to) < value) return null
  let [low, high] = [from, to]
  for (let i = 0; i < 60; i++) {
    const middle = (low + high) / 2
    if (rising(middle) < value) low = middle
    else high = middle
  }
  return high
}

/** Neighbouring steps nearer than this, L*, look alike: the end of the curve. */
const alike = 1

function tabletWarnings({ prints }: TabletCurve, paperDensity: number): Warning[] {
  const lightness = (i: number): number => lightnessFromDensity(prints.at(i)!)
  const warnings: Warning[] = []
  if (prints[0]! >= paperDensity + firstToneAbovePaper || lightness(0) - lightness(1) > alike) warnings.push({ code: 'tablet_ends_in_tone', message: 'The densest step of the tablet still prints a tone, so the lower end of the scale is not seen. Expose less, or use a tablet that reaches further.' })
  if (lightness(-2) - lightness(-1) > alike) warnings.push({ code: 'tablet_not_black', message: 'The thinnest steps still differ, so the paper\'s full black is not seen. Expose the tablet longer.' })
  return warnings
}
