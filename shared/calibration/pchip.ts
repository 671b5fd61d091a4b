import { ComputeError } from '../errors'

/**
 * Piecewise cubic Hermite interpolant that keeps the data's order: where the points rise, it rises; it never leaves the
 * values of the two points around it. Beyond the first and last point it stays at their values.
 *
 * Variant: slopes are Fritsch and Butland's weighted harmonic mean of the neighbouring secants, SIAM J. Sci. Stat. Comput.
 * 5(2):300–304, 1984 (0 where the secants differ in sign); ends by the three-point formula, kept in shape (SLATEC PCHIM).
 * @throws ComputeError `invalid_input` unless there are two or more finite points with strictly rising x.
 */
export function pchip(x: readonly number[], y: readonly number[]): (at: number) => number {
  requirePoints(x, y)
  const slopes = pchipSlopes(x, y)
  const last = x.length - 1
  return (at) => {
    if (!(at > x[0]!)) return y[0]!
    if (at >= x[last]!) return y[last]!
    const i = intervalOf(x, at)
    return hermite(x, y, slopes, i, at)
  }
}

/** The interpolant's slopes at the points; see `pchip`. */
export function pchipSlopes(x: readonly number[], y: readonly number[]): number[] {
  const widths = x.slice(1).map((right, i) => right - x[i]!)
  const secants = widths.map((width, i) => (y[i + 1]! - y[i]!) / width)
  if (secants.length === 1) return [secants[0]!, secants[0]!]
  const last = secants.length - 1
  return x.map((_, i) => {
    if (i === 0) return endSlope(widths[0]!, widths[1]!, secants[0]!, secants[1]!)
    if (i > last) return endSlope(widths[last]!, widths[last - 1]!, secants[last]!, secants[last - 1]!)
    return innerSlope(widths[i - 1]!, widths[i]!, secants[i - 1]!, secants[i]!)
  })
}

function innerSlope(widthBefore: number, widthAfter: number, before: number, after: number): number {
  if (!(before * after > 0)) return 0
  const [w1, w2] = [2 * widthAfter + widthBefore, widthAfter + 2 * widthBefore]
  return (w1 + w2) / (w1 / before + w2 / after)
}

function endSlope(width: number, nextWidth: number, secant: number, nextSecant: number): number {
  const slope = ((2 * width + nextWidth) * secant - width * nextSecant) / (width + nextWidth)
  if (Math.sign(slope) !== Math.sign(secant)) return 0
  const tooSteep = Math.sign(secant) !== Math.sign(nextSecant) && Math.abs(slope) > 3 * Math.abs(secant)
  return tooSteep ? 3 * secant : slope
}

function hermite(x: readonly number[], y: readonly number[], slopes: readonly number[], i: number, at: number): number {
  const width = x[i + 1]! - x[i]!
  const t = (at - x[i]!) / width
  const [from, to] = [y[i]!, y[i + 1]!]
  const value = from + t * t * (3 - 2 * t) * (to - from) + width * t * (1 - t) * ((1 - t) * slopes[i]! - t * slopes[i + 1]!)
  // Rounding may step over a point's value by its last bit.
  return Math.min(Math.max(from, to), Math.max(Math.min(from, to), value))
}

/** Index i with x[i] < at ≤ x[i + 1]. */
function intervalOf(x: readonly number[], at: number): number {
  let [below, above] = [0, x.length - 1]
  while (above - below > 1) {
    const middle = (below + above) >> 1
    if (x[middle]! < at) below = middle
    else above = middle
  }
  return below
}

function requirePoints(x: readonly number[], y: readonly number[]): void {
  const sound = x.length === y.length && x.length >= 2 && [...x, ...y].every(Number.isFinite) && x.every((v, i) => i === 0 || v > x[i - 1]!)
  if (!sound) throw new ComputeError('invalid_input', 'Interpolation needs two or more points with rising, finite positions.')
}
