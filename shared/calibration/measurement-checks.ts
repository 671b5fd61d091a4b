import type { ReadingChannel } from '../schemas/benches'
import type { Warning } from '../schemas/curves'
import { ComputeError } from '../errors'
import { densityFromLightness } from '../tone/density'
import { averageByLevel } from './levels'
import type { ReadingUnit } from './measurement-columns'
import type { Zero } from './measurements'

interface Patch { level: number, lightness: number }

/** Below these a reading says too little to bend a curve after. */
export const leastLevels = 5
export const leastLightnessRange = 10
export const leastDensityRange = 0.15
export const leastRankCorrelation = 0.5

/** A fall between neighbouring levels that is more than an instrument's last digit, L*. */
const leastFall = 0.05

/**
 * Refuses a reading that no curve can rest on.
 * @throws ComputeError `too_few_levels` under 5 different levels; `range_too_small` under 10 L* (0.15 in a density channel)
 * between the lightest and the darkest level; `levels_unrelated` when the rank correlation (Spearman) of level and
 * lightness is under 0.5.
 */
export function requireUsable(patches: readonly Patch[], channel: ReadingChannel): void {
  const levels = averageByLevel(patches)
  if (levels.length < leastLevels) throw new ComputeError('too_few_levels', `A curve needs at least ${leastLevels} different ink levels; these are ${levels.length}.`)
  requireRange(levels, channel)
  const correlation = rankCorrelation(patches.map(p => p.level), patches.map(p => p.lightness))
  if (correlation >= leastRankCorrelation) return
  const hint = correlation < -leastRankCorrelation ? 'The print gets darker as the level rises: perhaps level counts the other way here (0 is clear film).' : 'Check that each value stands beside its own level.'
  throw new ComputeError('levels_unrelated', `Lightness does not rise with the ink level. ${hint}`)
}

function requireRange(levels: readonly Patch[], channel: ReadingChannel): void {
  const lightnesses = levels.map(p => p.lightness)
  const [darkest, lightest] = [Math.min(...lightnesses), Math.max(...lightnesses)]
  if (channel.startsWith('density-')) {
    const densityRange = densityFromLightness(Math.max(darkest, 0.001)) - densityFromLightness(Math.max(lightest, 0.001))
    if (densityRange < leastDensityRange) throw new ComputeError('range_too_small', `Darkest and lightest patch differ by density ${densityRange.toFixed(2)}; ${leastDensityRange} is the least.`)
  }
  else if (lightest - darkest < leastLightnessRange) {
    throw new ComputeError('range_too_small', `Darkest and lightest patch differ by ${(lightest - darkest).toFixed(1)} L*; ${leastLightnessRange} is the least.`)
  }
}

/** What a person should know of a reading that is used all the same. */
export function warningsFor(patches: readonly Patch[], { unit, zero, paperGiven }: { unit: ReadingUnit, zero: Zero | undefined, paperGiven: boolean }): Warning[] {
  const levels = averageByLevel(patches)
  return [...zeroWarnings(levels, unit, zero, paperGiven), ...fallWarnings(levels), ...endWarnings(levels)]
}

function zeroWarnings(levels: readonly Patch[], unit: ReadingUnit, zero: Zero | undefined, paperGiven: boolean): Warning[] {
  if (zero === 'paper') return paperGiven ? [] : [{ code: 'paper_lightness_assumed', message: 'The paper was taken as L* 95. Give its own lightness if you know it.' }]
  const lightest = Math.max(...levels.map(p => p.lightness))
  if (lightest > 98) return [{ code: 'nulled_on_paper', message: 'The lightest patch reads like a perfect white, which no paper is. If the instrument was nulled on the paper, say so: zero: paper.' }]
  return unit === 'density' && zero === undefined ? [{ code: 'zero_assumed_absolute', message: 'Densities were taken as absolute. If the instrument was nulled on the paper, say so: zero: paper.' }] : []
}

function fallWarnings(levels: readonly Patch[]): Warning[] {
  let [worst, at] = [0, 0]
  for (let i = 1; i < levels.length; i++) {
    const fall = levels[i - 1]!.lightness - levels[i]!.lightness
    if (fall > worst) [worst, at] = [fall, i]
  }
  if (worst <= leastFall) return []
  const percent = (i: number): string => (100 * levels[i]!.level).toFixed(1)
  return [{ code: 'not_monotone', message: `Lightness falls by ${worst.toFixed(1)} L* between ${percent(at - 1)} % and ${percent(at)} % ink; the curve evens that out.` }]
}

function endWarnings(levels: readonly Patch[]): Warning[] {
  const warnings: Warning[] = []
  if (levels[0]!.level > 0.005) warnings.push({ code: 'no_clear_film', message: 'No patch was read through clear film; the deepest tone is guessed from the next one.' })
  if (levels.at(-1)!.level < 0.995) warnings.push({ code: 'no_full_ink', message: 'No patch was read under full ink; the lightest tone is guessed from the one before.' })
  return warnings
}

/** Spearman's rank correlation, ties given their mean rank; 0 when one side does not vary. */
export function rankCorrelation(x: readonly number[], y: readonly number[]): number {
  const [a, b] = [ranks(x), ranks(y)]
  const mean = (a.length + 1) / 2
  let [xy, xx, yy] = [0, 0, 0]
  for (let i = 0; i < a.length; i++) {
    const [p, q] = [a[i]! - mean, b[i]! - mean]
    xy += p * q
    xx += p * p
    yy += q * q
  }
  return xx > 0 && yy > 0 ? xy / Math.sqrt(xx * yy) : 0
}

function ranks(values: readonly number[]): number[] {
  const order = values.map((_, i) => i).sort((i, j) => values[i]! - values[j]!)
  const rank = new Array<number>(values.length)
  for (let from = 0; from < order.length;) {
    let to = from + 1
    while (to < order.length && values[order[to]!] === values[order[from]!]) to++
    for (let k = from; k < to; k++) rank[order[k]!] = (from + to + 1) / 2
    from = to
  }
  return rank
}
