import { valueAt } from '../tone/response'
import type { ResponsePoint } from './response-fit'
import { firstFit, inOrder } from './smooth-fit'

/** Ratio of a normal distribution's standard deviation to its median absolute deviation: 1/Φ⁻¹(3/4). */
export const madToDeviation = 1.4826022185056018
/** Residuals beyond so many deviations are spoiled patches. */
const dropBeyond = 4
/** Least deviation reckoned with, L*: patches nearer than 4 × 0.25 L* are never dropped. */
const leastDeviation = 0.25
const passes = 3
/** At most this share of the points is dropped. */
const greatestShare = 0.2

/** The median; the mean of the middle two of an even number. */
export function median(values: ArrayLike<number>): number {
  const sorted = Float64Array.from(values).sort()
  const middle = sorted.length >> 1
  return sorted.length % 2 === 1 ? sorted[middle]! : (sorted[middle - 1]! + sorted[middle]!) / 2
}

/** Median absolute deviation from the median, scaled to a normal distribution's standard deviation (Hampel, JASA 69:383–393, 1974). */
export function medianDeviation(values: ArrayLike<number>): number {
  const centre = median(values)
  return madToDeviation * median(Float64Array.from(values, v => Math.abs(v - centre)))
}

/**
 * For each point whether it is sound. A point is spoiled when its residual from the first fit, less the median residual,
 * exceeds 4 × 1.4826 MAD (Hampel identifier: Davies and Gather, JASA 88:782–792, 1993), at least 1 L*. In each of at most
 * 3 passes the points found are left out of the next fit; no more than a fifth of all.
 */
export function dropOutliers(points: readonly ResponsePoint[]): boolean[] {
  const used = points.map(() => true)
  for (let pass = 0; pass < passes; pass++) {
    const fit = firstFit(inOrder(points.filter((_, i) => used[i])))
    const residuals = points.map(p => p.lightness - valueAt(fit, p.level))
    const sound = residuals.filter((_, i) => used[i])
    const [centre, limit] = [median(sound), dropBeyond * Math.max(leastDeviation, medianDeviation(sound))]
    const spoiled = [...points.keys()].filter(i => used[i] && Math.abs(residuals[i]! - centre) > limit)
      .sort((a, b) => Math.abs(residuals[b]! - centre) - Math.abs(residuals[a]! - centre))
    const room = Math.floor(greatestShare * points.length) - used.filter(u => !u).length
    if (spoiled.length === 0 || room <= 0) break
    for (const i of spoiled.slice(0, room)) used[i] = false
  }
  return used
}
