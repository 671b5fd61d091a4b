import { ComputeError } from '../errors'
import type { LabPoint } from '../tone/looks'
import { cubicBasis, differencePenalty } from './bspline'
import { averageCurve } from './spline-average'
import { bestFit, penaltyOrder } from './spline-candidates'
import { splineCount } from './smooth-fit'

/** A bench's colours L*, a*, b* from paper white to its deepest tone, at equal steps of ink level. */
export type ColourPath = readonly LabPoint[]

/** Points of a path. */
const pathPoints = 65
export const leastPathPatches = 12

/**
 * The bench's own path from paper white to deepest tone: L*, a* and b* of all patches as P-splines of the ink level
 * (smoothing by restricted likelihood), read off at 65 levels from full ink to clear film.
 * @throws ComputeError `too_few_levels` with fewer than 12 patches.
 */
export function colourPathOf(patches: readonly { level: number, lab: LabPoint }[]): ColourPath {
  if (patches.length < leastPathPatches) throw new ComputeError('too_few_levels', `A colour path needs at least ${leastPathPatches} patches in colour.`)
  const sorted = [...patches].sort((a, b) => a.level - b.level || a.lab[0] - b.lab[0] || a.lab[1] - b.lab[1] || a.lab[2] - b.lab[2])
  const basis = cubicBasis(sorted.map(p => p.level), splineCount)
  const grid = cubicBasis(Array.from({ length: pathPoints }, (_, i) => 1 - i / (pathPoints - 1)), splineCount)
  const [l, a, b] = [0, 1, 2].map((axis) => {
    const best = bestFit(basis, Float64Array.from(sorted, p => p.lab[axis]!), differencePenalty(splineCount, penaltyOrder), splineCount)
    return averageCurve([{ candidate: best, weight: 1 }], [grid])
  }) as [Float64Array, Float64Array, Float64Array]
  return Array.from(l, (lightness, i) => [Math.min(100, Math.max(0, lightness)), a[i]!, b[i]!] as const)
}

/** Length of a path in CIELAB, ΔE*ab. */
export const pathLength = (path: ColourPath): number => path.slice(1).reduce((sum, point, i) => sum + distance(path[i]!, point), 0)

/**
 * Where along the path its point nearest to a colour lies: 0 at the deepest tone, 1 at paper, in shares of the path's length
 * (ΔE*ab, straight between its points).
 */
export function shareAlongPath(path: ColourPath, lab: LabPoint): number {
  let [walked, least, at] = [0, Infinity, 0]
  for (let i = 1; i < path.length; i++) {
    const [from, to] = [path[i - 1]!, path[i]!]
    const length = distance(from, to)
    const along = length === 0 ? 0 : Math.min(1, Math.max(0, dot(minus(lab, from), minus(to, from)) / length ** 2))
    const gap = distance(lab, [0, 1, 2].map(k => from[k]! + along * (to[k]! - from[k]!)) as unknown as LabPoint)
    if (gap < least) [least, at] = [gap, walked + along * length]
    walked += length
  }
  return walked === 0 ? 0 : 1 - at / walked
}

const minus = (a: LabPoint, b: LabPoint): LabPoint => [a[0] - b[0], a[1] - b[1], a[2] - b[2]]
const dot = (a: LabPoint, b: LabPoint): number => a[0] * b[0] + a[1] * b[1] + a[2] * b[2]
const distance = (a: LabPoint, b: LabPoint): number => Math.hypot(...minus(a, b))
