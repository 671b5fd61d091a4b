import { isotonic } from './isotonic'

/** Half width of a pointwise 95 % band in standard deviations of the draws: the normal quantile. */
const halfWidth = 1.96

/**
 * Pointwise 95 % band about a curve from draws at the same positions; never falling, never inside the curve. `spread` widens
 * the draws' standard deviation.
 */
export function bandsOf(curve: Float64Array, draws: readonly Float64Array[], spread = 1): { low: Float64Array, high: Float64Array } {
  const deviations = curve.map((_, i) => spread * deviationAt(draws, i))
  const low = isotonic(curve.map((value, i) => Math.max(0, value - halfWidth * deviations[i]!)))
  const high = isotonic(curve.map((value, i) => Math.min(100, value + halfWidth * deviations[i]!)))
  return { low: low.map((v, i) => Math.min(v, curve[i]!)), high: high.map((v, i) => Math.max(v, curve[i]!)) }
}

function deviationAt(draws: readonly Float64Array[], i: number): number {
  let [sum, square] = [0, 0]
  const origin = draws[0]![i]!
  for (const draw of draws) {
    const value = draw[i]! - origin
    sum += value
    square += value * value
  }
  return Math.sqrt(Math.max(0, square - sum * sum / draws.length) / (draws.length - 1))
}
