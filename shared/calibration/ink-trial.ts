import { ComputeError } from '../errors'
import { positionOf, valueAt } from '../tone/response'
import { median } from './outliers'
import { fitResponse } from './response-fit'

/** A patch of an ink trial: which mix it was printed with, how much of it, and what came of it. */
export interface TrialPatch { mix: number, level: number, lightness: number, deviation?: number | null }

export interface MixResult {
  mix: number
  /** level from which the print is paper white within 1 L*, with the levels that the patches allow (95 %); null: never */
  whiteFrom: number | null
  whiteFromLow: number | null
  whiteFromHigh: number | null
  /** L* from clear film to all of this mix */
  range: number
  /** L* that patches stand off the mix's own smooth curve (robust), and the spread within patches in the middle tones where it was read */
  roughness: number
  grain: number | null
}

export interface InkTrial { paperLightness: number, mixes: MixResult[], recommended: number | null, why: string }

const whiteWithin = 1
/** The best mix leaves a little in hand: white no later than here, with its uncertainty. */
const latestWhite = 0.97
/** Mixes whose white begins this near to one another are told apart by roughness. */
const alike = 0.05
const leastPatches = 7

/**
 * Which ink mix blocks just enough UV. For each mix a response is fitted to its own patches; paper white is foil's, if given, else the
 * middle of the patches near the lightest that any mix reached. Recommended is the mix whose white begins latest but still within its range, so that most of
 * its levels are tones; of those alike the smoothest. `names` are the mixes' names in sentences.
 * @throws ComputeError `too_few_levels` when a mix has fewer than 7 levels, `range_too_small` when none prints tones.
 */
export function readInkTrial(patches: readonly TrialPatch[], names: readonly string[], foilLightness?: number): InkTrial {
  const byMix = names.map((_, mix) => patches.filter(p => p.mix === mix))
  byMix.forEach((of, mix) => {
    if (new Set(of.map(p => p.level)).size < leastPatches) throw new ComputeError('too_few_levels', `${names[mix]} has fewer than ${leastPatches} readable patches.`)
  })
  const fits = byMix.map(of => fitResponse(of))
  const paperLightness = foilLightness ?? whiteOf(patches, Math.max(...fits.map(fit => fit.whiteLightness)))
  const mixes = fits.map((fit, mix) => mixResult(mix, fit, byMix[mix]!, paperLightness - whiteWithin))
  return { paperLightness, mixes, ...recommend(mixes, names) }
}

/** The middle of all patches near the lightest that a mix reached: no single rough mix tells what white is. */
const whiteOf = (patches: readonly TrialPatch[], lightest: number): number =>
  Math.min(lightest, median(patches.map(p => p.lightness).filter(l => l > lightest - 2 * whiteWithin)))

function mixResult(mix: number, fit: ReturnType<typeof fitResponse>, patches: readonly TrialPatch[], white: number): MixResult {
  const reached = (response: readonly number[]): number | null => response.at(-1)! < white ? null : positionOf(response, white)
  const middle = (fit.blackLightness + fit.whiteLightness) / 2
  const quarter = (fit.whiteLightness - fit.blackLightness) / 4
  const spreads = patches.flatMap(p => p.deviation !== undefined && p.deviation !== null && Math.abs(p.lightness - middle) < quarter ? [p.deviation] : [])
  return {
    mix, whiteFrom: reached(fit.response), whiteFromLow: reached(fit.high), whiteFromHigh: reached(fit.low),
    range: fit.whiteLightness - fit.blackLightness,
    roughness: 1.4826 * median(patches.map(p => Math.abs(p.lightness - valueAt(fit.response, p.level)))),
    grain: spreads.length > 0 ? median(spreads) : null,
  }
}

function recommend(mixes: readonly MixResult[], names: readonly string[]): { recommended: number | null, why: string } {
  const blocking = mixes.filter(m => m.whiteFrom !== null)
  if (blocking.length === 0) return { recommended: null, why: 'No mix holds back enough UV: even all of it prints darker than paper white. Try more ink, another ink, or a shorter exposure scale.' }
  const safe = blocking.filter(m => (m.whiteFromHigh ?? 1) <= latestWhite)
  const among = safe.length > 0 ? safe : blocking
  const latest = among.reduce((a, b) => b.whiteFrom! > a.whiteFrom! ? b : a)
  const best = among.filter(m => latest.whiteFrom! - m.whiteFrom! <= alike).reduce((a, b) => unsmoothness(b) < unsmoothness(a) ? b : a)
  const percent = Math.round(100 * best.whiteFrom!)
  const tight = safe.length === 0 ? ' It has nothing in hand, so white may fail on a weak day.' : ''
  const smoother = best === latest ? '' : ` ${names[latest.mix]} would use a little more of its range, but prints rougher.`
  return { recommended: best.mix, why: `${names[best.mix]} prints paper white from ${percent} % on, so ${percent} of its 100 steps are tones: of the mixes that block enough, it wastes the least.${smoother}${tight}` }
}

const unsmoothness = (mix: MixResult): number => Math.hypot(mix.roughness, mix.grain ?? 0)
