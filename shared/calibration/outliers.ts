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

/** A point's value is compared with so many neighbours in level on each side. */
const neighbours = 2

/**
 * For each point whether it is sound. A point is spoiled when its residual from the first fit, less the median residual,
 * exceeds 4 × 1.4826 MAD (Hampel identifier: Davies and Gather, JASA 88:782–792, 1993), at least 1 L*, *and* it breaks the
 * order: too light though lighter than a next one, too dark though darker than one before (else a steep part that the first
 * fit cuts short would be taken for dirt). Of near neighbours only the worst is dropped in a pass, as it bends the fit away
 * from the others. In each of at most 3 passes the points found are left out of the next fit; no more than a fifth of all.
 */
export function dropOutliers(points: readonly ResponsePoint[]): boolean[] {
  const used = points.map(() => true)
  for (let pass = 0; pass < passes; pass++) {
    const order = inOrder([...points.keys()].filter(i => used[i]).map(i => ({ ...points[i]!, i })))
    const fit = firstFit(order)
    const residuals = order.map(p => p.lightness - valueAt(fit, p.level))
    const [centre, limit] = [median(residuals), dropBeyond * Math.max(leastDeviation, medianDeviation(residuals))]
    const distance = (place: number): number => Math.abs(residuals[place]! - centre)
    const isWorst = (place: number): boolean => [...order.keys()].slice(Math.max(0, place - neighbours), place + neighbours + 1).every(k => distance(k) <= distance(place))
    const spoiled = [...order.keys()]
      .filter(place => distance(place) > limit && isWorst(place) && breaksOrder(order, place, residuals[place]! > centre))
      .sort((a, b) => distance(b) - distance(a))
    const room = Math.floor(greatestShare * points.length) - (points.length - order.length)
    if (spoiled.length === 0 || room <= 0) break
    for (const place of spoiled.slice(0, room)) used[order[place]!.i] = false
  }
  return used
}

function breaksOrder(order: readonly ResponsePoint[], place: number, isLight: boolean): boolean {
  const value = order[place]!.lightness
  return isLight
    ? order.slice(place + 1, place + 1 + neighbours).some(p => p.lightness < value)
    : order.slice(Math.max(0, place - neighbours), place).some(p => p.lightness > value)
}
