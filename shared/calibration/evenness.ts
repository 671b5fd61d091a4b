import { ComputeError } from '../errors'
import { valueAt } from '../tone/response'
import { median } from './outliers'
import { solveLeastSquares } from './reading/least-squares'
import { toneWeights } from './tone-weights'
import type { WedgePatch } from './wedge-print'

/** A patch with the spread of its pixels, L*; null where none was read. */
export interface EvennessPatch extends WedgePatch { deviation: number | null }

/** How even one print came out. All figures are L* at the tone that shows them most. */
export interface Evenness {
  /** within patches: standard deviation of a pixel by the paper's texture, the scanner's noise taken off; null where no spread was read */
  texture: number | null
  /** between patches: standard deviation of what is left when tone, gradient and light have been taken off, and the patches' own noise */
  mottle: number
  /** coating from the middle to the side along its run, and the run's direction in degrees, 0 to the right, 90 down: that way it gets lighter */
  gradient: number
  gradientDegrees: number
  /** light from the middle to the edges: how much lighter the middles of the sides come out than the middle, to the right and down */
  light: { right: number, down: number, edges: number }
}

const leastPatches = 60
/** Patches count whose coating shows by at least this share of the most. */
const shows = 0.4
const isWhite = 0.05
/** Keeps coating and light apart where tones tell them apart badly; in patches. */
const ridge = 1

/**
 * Evenness of coating and light from a print's patches and the response fitted to them (1025 L*). Residuals are a sum of the
 * coating's weight times a plane and the exposure's weight times a quadratic field (weights: `toneWeights`), by ridge least
 * squares; `mottle` is what remains.
 * @throws ComputeError `too_few_levels` under 60 patches.
 */
export function evennessOf(patches: readonly EvennessPatch[], response: ArrayLike<number>): Evenness {
  if (patches.length < leastPatches) throw new ComputeError('too_few_levels', `Evenness needs at least ${leastPatches} patches; these are ${patches.length}.`)
  const { coating, exposure } = toneWeights(response, patches.map(p => p.level))
  const residuals = patches.map(p => p.lightness - valueAt(response, p.level))
  const rows = patches.map(({ x, y }, i) => [coating[i]! * x, coating[i]! * y, ...[x, y, x * x - 1 / 3, x * y, y * y - 1 / 3].map(v => exposure[i]! * v), coating[i]!, exposure[i]!])
  const fields = solveLeastSquares(rows, residuals, undefined, ridge)
  const left = residuals.map((r, i) => r - rows[i]!.reduce((sum, v, k) => sum + v * fields[k]!, 0))
  const [right, down] = [fields[0]!, fields[1]!]
  return {
    texture: textureOf(patches, coating),
    mottle: mottleOf(left, coating, rows[0]!.length),
    gradient: Math.hypot(right, down), gradientDegrees: Math.atan2(down, right) * 180 / Math.PI,
    light: { right: fields[2]!, down: fields[3]!, edges: (fields[4]! + fields[6]!) / 2 },
  }
}

/** Spread of pixels where the coating shows, over its weight; what paper white spreads is scanner and paper. */
function textureOf(patches: readonly EvennessPatch[], coating: Float64Array): number | null {
  const spreads = (isOne: (weight: number) => boolean, of: (deviation: number, weight: number) => number): number[] =>
    patches.flatMap(({ deviation }, i) => deviation !== null && isOne(coating[i]!) ? [of(deviation, coating[i]!)] : [])
  const white = spreads(w => w < isWhite, d => d)
  const noise = white.length > 0 ? median(white) : 0
  const toned = spreads(w => w >= shows, (d, w) => Math.sqrt(Math.max(0, d * d - noise * noise)) / w)
  return toned.length > 0 ? median(toned) : null
}

/** Root mean square of what is left where the coating shows, over its weight, less the noise that paper white shows. */
function mottleOf(left: readonly number[], coating: Float64Array, fields: number): number {
  const whites = left.filter((_, i) => coating[i]! < isWhite)
  const noise = whites.length > 3 ? whites.reduce((sum, r) => sum + r * r, 0) / whites.length : 0
  let [square, count] = [0, 0]
  left.forEach((r, i) => {
    if (coating[i]! < shows) return
    square += (r * r - noise) / coating[i]! ** 2
    count++
  })
  return Math.sqrt(Math.max(0, square / Math.max(1, count - fields)))
}
