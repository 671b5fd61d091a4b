import { monomials } from '../monomials'
import { solveLeastSquares } from './least-squares'

/** What a reading says of one patch; null where it could not be read. */
export interface ReadPatch { level: number, lightness: number | null }
/** A patch's place, −1 … 1 across the wedge. */
export interface PatchPlace { x: number, y: number }

/** Patches read in both that are needed for a judgement. */
const leastPatches = 80
/** Neighbours in level on each side that a line is laid through for the tone. */
const neighbours = 8
/** Degree of the slow fall-off in x and y. */
const degree = 3

/**
 * How alike two readings of the same film are beyond what the film makes alike: the correlation of what is left of the patches' L*
 * when the tone (a line through the neighbours in level) and the slow fall-off of light and coating (cubics in x and y, for all tones
 * and for the middle ones) are taken away. What is left of one print scanned twice is its own coating and paper, so it correlates; two
 * prints' are strangers. Null with fewer than 80 patches in common, or where nothing is left. Derived; no source.
 */
export function printLikeness(places: readonly PatchPlace[], first: readonly ReadPatch[], second: readonly ReadPatch[]): number | null {
  const common = places.flatMap(({ x, y }, i) => {
    const [a, b] = [first[i]?.lightness ?? null, second[i]?.lightness ?? null]
    return a === null || b === null ? [] : [{ x, y, level: first[i]!.level, values: [a, b] as const }]
  }).sort((p, q) => p.level - q.level)
  if (common.length < leastPatches) return null
  const [a, b] = ([0, 1] as const).map((k) => {
    const values = common.map(patch => patch.values[k])
    return withoutFallOff(common, values, withoutTone(common, values))
  }) as [number[], number[]]
  return correlation(a, b)
}

/** Likeness from which two readings count as one print; chosen on simulated prints. */
export const samePrintFrom = 0.75

/** What each value differs from the line through its neighbours, the values being in order of level. */
const withoutTone = (at: { level: number }[], values: number[]): number[] => values.map((value, i) => {
  const from = Math.max(0, i - neighbours), to = Math.min(values.length, i + 1 + neighbours)
  let [n, sx, sy, sxx, sxy] = [0, 0, 0, 0, 0]
  for (let k = from; k < to; k++) {
    if (k === i) continue
    const x = at[k]!.level - at[i]!.level
    n++
    sx += x
    sy += values[k]!
    sxx += x * x
    sxy += x * values[k]!
  }
  const spread = n * sxx - sx * sx
  // The line's value at the patch's own level; the mean where all neighbours have one level.
  return value - (spread > 1e-9 ? (sxx * sy - sx * sxy) / spread : sy / n)
})

function withoutFallOff(places: readonly PatchPlace[], values: number[], rests: number[]): number[] {
  const [least, most] = [Math.min(...values), Math.max(...values)]
  const terms = monomials(places, degree)
  const count = terms.length / places.length
  const rows = places.map((_, i) => {
    const tone = (values[i]! - least) / (most - least || 1)
    const row = [1, ...terms.subarray(i * count, (i + 1) * count)]
    return [...row, ...row.map(term => term * 4 * tone * (1 - tone))]
  })
  const slow = solveLeastSquares(rows, rests, undefined, 1e-6)
  return rests.map((rest, i) => rest - rows[i]!.reduce((sum, term, k) => sum + term * slow[k]!, 0))
}

function correlation(a: number[], b: number[]): number | null {
  const [aa, bb, ab] = [dot(a, a), dot(b, b), dot(a, b)]
  return aa > 0 && bb > 0 ? ab / Math.sqrt(aa * bb) : null
}

const dot = (a: number[], b: number[]): number => a.reduce((sum, v, i) => sum + v * b[i]!, 0)
