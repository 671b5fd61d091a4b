import type { WedgePage } from '../wedge/page'
import type { Sampler } from './decode-marker'
import { edgePosition } from './edge-position'
import type { PageMap } from './page-map'
import type { Point } from './picture'
import { solveLeastSquares } from './least-squares'
import type { ShiftField } from './thin-plate'

/** Two neighbouring cells must differ by this much for their edge to be looked for, L*. */
const leastDifference = 6
/** How far an edge may lie from where it is expected, mm. */
const reachMm = 1.4
/** Part of an edge that is used, profiles averaged along it, steps of a profile. */
const [usedShare, profiles, steps] = [0.7, 9, 41]
/** Degree of the shifts' polynomials: enough for a sheet's slow waves. */
const degree = 5
/** Fewer edges than this cannot carry the polynomial. */
const leastEdges = 60
/** What ties the shifts to the markers, in edges. */
const markerWeight = 4

/** An edge between two cells: where it should be (mm) and how far off it was seen, along x or y (mm). */
interface SeenEdge { at: Point, axis: 0 | 1, offMm: number }

/**
 * Corrects a map inside the field, where no markers stand, from the edges between cells of different tone: smooth shifts of the
 * page (polynomials of degree 5 in x and y, robust) that bring the edges to where the page has them. Pages without adjoining
 * cells, or with too few visible edges, keep their map. `lightness` holds a first reading, NaN where there is none.
 */
export function mapThroughCellEdges(page: WedgePage, map: PageMap, lightness: ArrayLike<number>, sample: Sampler): PageMap {
  if (page.kind !== 'scattered') return map
  const edges = seenEdges(page, map, lightness, sample)
  if (edges.length < leastEdges) return map
  const shift = smoothShifts(page, edges)
  return ([x, y]) => {
    const [dx, dy] = shift([x, y])
    return map([x + dx, y + dy])
  }
}

function seenEdges(page: WedgePage, map: PageMap, lightness: ArrayLike<number>, sample: Sampler): SeenEdge[] {
  const edges: SeenEdge[] = []
  page.patches.forEach(({ xMm, yMm, widthMm, heightMm }, i) => {
    const lookFor = (neighbour: number, at: Point, axis: 0 | 1, lengthMm: number): void => {
      if (!(Math.abs(lightness[i]! - lightness[neighbour]!) >= leastDifference)) return
      const offMm = edgeOffset(map, sample, at, axis, lengthMm * usedShare)
      if (offMm !== null) edges.push({ at, axis, offMm })
    }
    if ((i + 1) % page.columns !== 0) lookFor(i + 1, [xMm + widthMm, yMm + heightMm / 2], 0, heightMm)
    if (i + page.columns < page.patches.length) lookFor(i + page.columns, [xMm + widthMm / 2, yMm + heightMm], 1, widthMm)
  })
  return edges
}

/** How far from `at` the edge lies along its axis, mm; null when it is not seen. */
function edgeOffset(map: PageMap, sample: Sampler, at: Point, axis: 0 | 1, lengthMm: number): number | null {
  const [cx, cy] = map(at)
  const [ax, ay] = map(axis === 0 ? [at[0] + 1, at[1]] : [at[0], at[1] + 1])
  const [lx, ly] = map(axis === 0 ? [at[0], at[1] + 1] : [at[0] + 1, at[1]])
  const profile = new Float64Array(steps)
  for (let k = 0; k < profiles; k++) {
    const s = lengthMm * ((k + 0.5) / profiles - 0.5)
    for (let i = 0; i < steps; i++) {
      const t = reachMm * (2 * i / (steps - 1) - 1)
      profile[i]! += sample(cx + (lx - cx) * s + (ax - cx) * t, cy + (ly - cy) * s + (ay - cy) * t) / profiles
    }
  }
  const edge = edgePosition(profile, Number.EPSILON, 0)
  return edge && reachMm * (2 * edge.at / (steps - 1) - 1)
}

/** Polynomials fitted to the offsets of both axes; edges beyond 3 robust deviations are dropped, three times. */
function smoothShifts(page: WedgePage, edges: SeenEdge[]): ShiftField {
  const toUnit = ([x, y]: Point): Point => [2 * x / page.widthMm - 1, 2 * y / page.heightMm - 1]
  const anchors = page.markers.map(({ place }): Point => toUnit([place.xMm + place.widthMm / 2, place.yMm + place.heightMm / 2]))
  const along = ([0, 1] as const).map((axis) => {
    let kept = edges.filter(edge => edge.axis === axis)
    let coefficients: Float64Array = new Float64Array(0)
    for (let pass = 0; pass < 3; pass++) {
      const rows = [...kept.map(({ at }) => powers(toUnit(at))), ...anchors.map(powers)]
      const values = [...kept.map(({ offMm }) => offMm), ...anchors.map(() => 0)]
      coefficients = solveLeastSquares(rows, values, rows.map((_, i) => i < kept.length ? 1 : markerWeight), 0.01)
      const misses = kept.map(({ at, offMm }) => Math.abs(offMm - dot(coefficients, powers(toUnit(at)))))
      const limit = 3 * 1.4826 * ([...misses].sort((a, b) => a - b)[misses.length >> 1] ?? 0) + 1e-3
      kept = kept.filter((_, i) => misses[i]! <= limit)
    }
    return coefficients
  }) as [Float64Array, Float64Array]
  return (point) => {
    const p = powers(toUnit(point))
    return [dot(along[0], p), dot(along[1], p)]
  }
}

/** All products Tᵢ(u)·Tⱼ(v) of Chebyshev polynomials with i + j ≤ degree. */
function powers([u, v]: Point): Float64Array {
  const [p, q] = [chebyshev(u), chebyshev(v)]
  const out = new Float64Array((degree + 1) * (degree + 2) / 2)
  let k = 0
  for (let i = 0; i <= degree; i++) for (let j = 0; i + j <= degree; j++) out[k++] = p[i]! * q[j]!
  return out
}

function chebyshev(x: number): number[] {
  const out = [1, x]
  for (let i = 2; i <= degree; i++) out.push(2 * x * out[i - 1]! - out[i - 2]!)
  return out
}

const dot = (a: Float64Array, b: Float64Array): number => a.reduce((sum, value, i) => sum + value * b[i]!, 0)
