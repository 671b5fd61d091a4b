import type { Warning } from '../schemas/curves'
import { ComputeError } from '../errors'
import { isotonic } from './isotonic'
import { pchip } from './pchip'

/** A patch as the scanner saw it and as it is, L*. */
export interface ProfilePoint { scanned: number, measured: number }

export interface ScannerProfile {
  /** true L* of a scanned one; `isOutside` where no point reaches: the ends' own shift is held there */
  correct: (scanned: number) => { lightness: number, isOutside: boolean }
  /** range of scanned L* that the points span */
  from: number
  to: number
  warnings: Warning[]
}

const leastPoints = 5
/** Points read nearer than this are one point, L*. */
const together = 0.2
/** Range of scanned L* below which a profile tells nothing of the rest. */
const leastRange = 30
const wideGap = 20
/** A lightness so near to an end of the scale was perhaps cut off. */
const [nearWhite, nearBlack] = [99.5, 0.5]
/** Steps apart by this much that the scanner saw alike, L*. */
const clippedStep = 1
/** A fall, L*, that is more than noise. */
const leastFall = 0.3

/**
 * Monotone tone correction of a scanner: isotonic means of the true lightness by scanned lightness, joined by PCHIP. From a
 * grey scale of known densities in the same scan, or patches of an own print that an instrument measured. It corrects
 * tone; a pigment's colour it does not know.
 * @throws ComputeError `too_few_levels` under 5 points, `range_too_small` under 30 L*, `levels_unrelated` when light and dark
 * are exchanged, `invalid_input` for values outside 0 … 100.
 */
export function makeScannerProfile(points: readonly ProfilePoint[]): ScannerProfile {
  for (const { scanned, measured } of points) if (!(scanned >= 0 && scanned <= 100 && measured >= 0 && measured <= 100)) throw new ComputeError('invalid_input', 'A lightness lies between 0 and 100.')
  const groups = grouped(points)
  if (groups.length < leastPoints) throw new ComputeError('too_few_levels', `A profile needs at least ${leastPoints} different greys; these are ${groups.length}.`)
  const scanned = groups.map(g => g.scanned)
  const [from, to] = [scanned[0]!, scanned.at(-1)!]
  if (groups.at(-1)!.measured <= groups[0]!.measured) throw new ComputeError('levels_unrelated', 'What the scanner sees as light was measured as dark. Check that each value stands beside its own patch.')
  if (to - from < leastRange) throw new ComputeError('range_too_small', `The greys span only ${(to - from).toFixed(0)} L*; at least ${leastRange} are needed, from near white to near black.`)
  const fitted = [...isotonic(groups.map(g => g.measured), groups.map(g => g.count))]
  const between = pchip(scanned, fitted)
  return { correct: lightness => corrected(lightness, from, to, between), from, to, warnings: warningsOf(points, groups) }
}

function corrected(lightness: number, from: number, to: number, between: (scanned: number) => number): { lightness: number, isOutside: boolean } {
  const end = Math.min(to, Math.max(from, lightness))
  return { lightness: Math.min(100, Math.max(0, between(end) + lightness - end)), isOutside: end !== lightness }
}

/** A patch with its lightness corrected: L* of its L*a*b* as well, its a* and b* as scanned. Null stays null. */
export function correctPatch<P extends { lightness: number | null, lab: [number, number, number] | null }>(profile: ScannerProfile, patch: P): P {
  if (patch.lightness === null) return patch
  const { lightness } = profile.correct(patch.lightness)
  return { ...patch, lightness, lab: patch.lab && [lightness, patch.lab[1], patch.lab[2]] }
}

interface Group extends ProfilePoint { count: number }

/** Points by rising scanned lightness, those that lie together averaged. */
function grouped(points: readonly ProfilePoint[]): Group[] {
  const groups: ProfilePoint[][] = []
  for (const point of [...points].sort((a, b) => a.scanned - b.scanned || a.measured - b.measured)) {
    const group = groups.at(-1)
    if (group && point.scanned - group[0]!.scanned < together) group.push(point)
    else groups.push([point])
  }
  const mean = (values: number[]): number => values.reduce((a, b) => a + b, 0) / values.length
  return groups.map(group => ({ scanned: mean(group.map(p => p.scanned)), measured: mean(group.map(p => p.measured)), count: group.length }))
}

function warningsOf(points: readonly ProfilePoint[], groups: readonly Group[]): Warning[] {
  const said: [boolean, string, string][] = [
    [isClipped(points, p => p.scanned >= nearWhite), 'clipped_light', 'The scanner shows different light greys alike: the lights are cut off. Scan again with less exposure and automatic correction off.'],
    [isClipped(points, p => p.scanned <= nearBlack), 'clipped_dark', 'The scanner shows different dark greys alike: the darks are cut off. Scan again with automatic correction off.'],
    [isStretched(points), 'auto_levelled', 'The lightest and the darkest grey fill the scanner\'s whole scale though they are neither white nor black: automatic levels were on. Such a profile holds for this one scan only; switch them off and scan again.'],
    [groups.some((g, i) => i > 0 && groups[i - 1]!.measured - g.measured > leastFall), 'not_monotone', 'Some greys that the scanner sees as lighter were measured as darker. Check dust, glare, and the order of the values.'],
    [groups.some((g, i) => i > 0 && g.scanned - groups[i - 1]!.scanned > wideGap), 'wide_gap', `Between two of the greys lie more than ${wideGap} L*; the correction there is a guess. More greys make it better.`],
    [groups.length < 8, 'few_points', 'With fewer than 8 greys the correction between them is coarse.'],
  ]
  return said.filter(([holds]) => holds).map(([, code, message]) => ({ code, message }))
}

function isClipped(points: readonly ProfilePoint[], isAtEnd: (point: ProfilePoint) => boolean): boolean {
  const measured = points.filter(isAtEnd).map(p => p.measured)
  return measured.length > 1 && Math.max(...measured) - Math.min(...measured) > clippedStep
}

function isStretched(points: readonly ProfilePoint[]): boolean {
  const lightest = points.reduce((a, b) => b.scanned > a.scanned ? b : a)
  const darkest = points.reduce((a, b) => b.scanned < a.scanned ? b : a)
  return lightest.scanned >= nearWhite && darkest.scanned <= nearBlack && lightest.measured < 98 && darkest.measured > 3
}
