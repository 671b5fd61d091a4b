/** Weights that make each wanted sample of an axis from a run of stored ones. */
export interface Taps {
  /** first stored sample of each wanted one */
  first: Int32Array
  /** stored samples for each */
  count: number
  /** `count` weights for each wanted sample, adding up to 1 */
  weights: Float32Array
}

interface Kernel { reach: number, at: (distance: number) => number }

/** The tent: an average of averages. Never negative, so that light beside a bright edge can't turn darker than it was. */
const tent: Kernel = { reach: 1, at: d => Math.max(0, 1 - Math.abs(d)) }

/** Cubic convolution with a = −½: R. G. Keys, IEEE Trans. ASSP 29 (1981), 1153–1160, equation 15. */
export const cubic: Kernel = {
  reach: 2,
  at: (distance) => {
    const d = Math.abs(distance)
    return d < 1 ? (1.5 * d - 2.5) * d * d + 1 : d < 2 ? ((-0.5 * d + 2.5) * d - 4) * d + 2 : 0
  },
}

/** Which stored sample stands for one beyond the ends. */
type Beyond = (index: number, stored: number) => number
const repeatLast: Beyond = (index, stored) => Math.max(0, Math.min(index, stored - 1))
/** Mirrors about the last sample, so that a fine regular pattern goes on as it is. */
const mirrorAtLast: Beyond = (index, stored) => {
  const period = Math.max(1, 2 * (stored - 1))
  const within = ((index % period) + period) % period
  return within < stored ? within : period - within
}

/** Taps for `wanted` samples over the stretch that starts at `start` and has `length` of the `stored` samples. */
function makeTaps(kernel: Kernel, scale: number, beyond: Beyond, start: number, length: number, wanted: number, stored: number): Taps {
  const ratio = length / wanted, reach = kernel.reach * scale
  const count = Math.min(stored, Math.ceil(2 * reach))
  const first = new Int32Array(wanted)
  const weights = new Float32Array(wanted * count)
  for (let i = 0; i < wanted; i++) {
    const centre = start + (i + 0.5) * ratio - 0.5
    const low = Math.floor(centre - reach) + 1, high = Math.ceil(centre + reach) - 1
    first[i] = Math.max(0, Math.min(low, stored - count))
    const exact = new Float64Array(count)
    let sum = 0
    for (let k = low; k <= high; k++) {
      const weight = kernel.at((k - centre) / scale)
      exact[beyond(k, stored) - first[i]!]! += weight
      sum += weight
    }
    for (let k = 0; k < count; k++) weights[i * count + k] = exact[k]! / sum
  }
  return { first, count, weights }
}

export const averagingTaps = (start: number, length: number, wanted: number, stored: number) =>
  makeTaps(tent, Math.max(1, length / wanted), mirrorAtLast, start, length, wanted, stored)
export const interpolatingTaps = (start: number, length: number, wanted: number, stored: number) =>
  makeTaps(cubic, 1, repeatLast, start, length, wanted, stored)

/** `to[i] = Σ weight · from[…]` along a row. */
export function applyTaps(taps: Taps, from: Float32Array | Uint16Array, to: Float32Array): void {
  if (taps.count === 4) return applyFour(taps, from, to)
  const { first, count, weights } = taps
  for (let i = 0, w = 0; i < first.length; i++, w += count) {
    const start = first[i]!
    let sum = 0
    for (let k = 0; k < count; k++) sum += weights[w + k]! * from[start + k]!
    to[i] = sum
  }
}

/** The same, without the inner loop: enlarging spends most of its time here. */
function applyFour({ first, weights }: Taps, from: Float32Array | Uint16Array, to: Float32Array): void {
  for (let i = 0, w = 0; i < first.length; i++, w += 4) {
    const at = first[i]!
    to[i] = weights[w]! * from[at]! + weights[w + 1]! * from[at + 1]! + weights[w + 2]! * from[at + 2]! + weights[w + 3]! * from[at + 3]!
  }
}
