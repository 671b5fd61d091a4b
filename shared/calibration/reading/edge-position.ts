/** Where a profile across an edge crosses half way, and how wide the edge is. */
export interface EdgePosition {
  /** In steps from the profile's first value, fractional. */
  at: number
  /** Steps from 10 % to 90 % of the rise. */
  width: number
  /** Second plateau minus first, signed. */
  rise: number
}

/**
 * The edge in a profile that goes from one even level to another: levels are the means of the first and the last quarter,
 * the place is where the values cross half way nearest the middle, by linear interpolation. Null when the rise is
 * less than `leastRise` or has not the wanted sign (`1`, `-1`, or `0` for either).
 */
export function edgePosition(profile: ArrayLike<number>, leastRise: number, sign: -1 | 0 | 1): EdgePosition | null {
  const n = profile.length
  const quarter = Math.max(2, n >> 2)
  const [first, second] = [mean(profile, 0, quarter), mean(profile, n - quarter, n)]
  const rise = second - first
  if (Math.abs(rise) < leastRise || rise * sign < 0) return null
  const at = crossing(profile, first, rise, 0.5)
  const [low, high] = [crossing(profile, first, rise, 0.1, at, -1), crossing(profile, first, rise, 0.9, at, 1)]
  return at === null ? null : { at, width: low === null || high === null ? n : high - low, rise }
}

function mean(values: ArrayLike<number>, from: number, to: number): number {
  let sum = 0
  for (let i = from; i < to; i++) sum += values[i]!
  return sum / (to - from)
}

/** Where the profile passes `share` of its rise: nearest the middle, or first from `start` in a direction. */
function crossing(profile: ArrayLike<number>, first: number, rise: number, share: number, start: number | null = null, direction = 0): number | null {
  const n = profile.length
  const from = start ?? (n - 1) / 2
  let best: number | null = null
  for (let i = 0; i + 1 < n; i++) {
    const [a, b] = [(profile[i]! - first) / rise - share, (profile[i + 1]! - first) / rise - share]
    if (a > 0 || b <= 0) continue
    const at = i + a / (a - b)
    if (direction !== 0 && (at - from) * direction < 0) continue
    if (best === null || Math.abs(at - from) < Math.abs(best - from)) best = at
  }
  return best
}
