import { isotonic } from './isotonic'
import { averageOf } from './spline-average'

/** 97.5 % quantile of the normal distribution. */
const pointwiseWidth = 1.96
const simultaneousShare = 0.95
/** Deviations below this, L*, do not count when draws are compared as a whole: no reading is that fine. */
const leastDeviation = 0.005

export interface Band { low: Float64Array, high: Float64Array }

/**
 * Pointwise 95 % band about a curve from draws at the same positions; never falling, never inside the curve. `spread` widens
 * the draws' standard deviation.
 */
export function bandsOf(curve: Float64Array, draws: readonly Float64Array[], spread = 1): Band {
  return around(curve, deviationsOf(draws).map(d => pointwiseWidth * spread * d))
}

/**
 * A 95 % band that holds for all positions at once: as many standard deviations wide as 95 % of the draws stay within
 * everywhere (Ruppert, Wand and Carroll, Semiparametric Regression, 2003, 6.5). `spread` as for `bandsOf`.
 */
export function simultaneousBands(curve: Float64Array, draws: readonly Float64Array[], spread = 1): Band {
  const deviations = deviationsOf(draws).map(d => Math.max(leastDeviation, d))
  const means = averageOf(draws)
  const farthest = draws.map(draw => draw.reduce((most, v, i) => Math.max(most, Math.abs(v - means[i]!) / deviations[i]!), 0)).sort((a, b) => a - b)
  const width = farthest[Math.min(farthest.length - 1, Math.floor(simultaneousShare * farthest.length))]!
  return around(curve, deviations.map(d => width * spread * d))
}

function around(curve: Float64Array, half: Float64Array): Band {
  const low = isotonic(curve.map((value, i) => Math.max(0, value - half[i]!)))
  const high = isotonic(curve.map((value, i) => Math.min(100, value + half[i]!)))
  return { low: low.map((v, i) => Math.min(v, curve[i]!)), high: high.map((v, i) => Math.max(v, curve[i]!)) }
}

function deviationsOf(draws: readonly Float64Array[]): Float64Array {
  return draws[0]!.map((origin, i) => {
    let [sum, square] = [0, 0]
    for (const draw of draws) {
      const value = draw[i]! - origin
      sum += value
      square += value * value
    }
    return Math.sqrt(Math.max(0, square - sum * sum / draws.length) / (draws.length - 1))
  })
}
