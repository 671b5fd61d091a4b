import type { Component, Labelled } from './components'
import type { Point } from './picture'

/** Share of the hull's area that a quadrilateral may miss. */
const greatestLoss = 0.15

/** Four corners, clockwise as seen in the picture (y down). */
export type Quadrilateral = readonly [Point, Point, Point, Point]

/**
 * The quadrilateral that a component's outline makes, or null when its hull is no quadrilateral: the convex hull of its
 * outer pixel corners, thinned by dropping the corner that costs the least area until four are left (Visvalingam and
 * Whyatt, Cartographic Journal 30(1):46–51, 1993).
 */
export function quadrilateralOf({ labels }: Labelled, component: Component, width: number): Quadrilateral | null {
  const hull = convexHull(outerCorners(labels, component, width))
  const whole = areaOf(hull)
  while (hull.length > 4) hull.splice(cheapestCorner(hull), 1)
  if (hull.length < 4 || areaOf(hull) < (1 - greatestLoss) * whole) return null
  return hull as unknown as Quadrilateral
}

/** The outer corners of the first and the last pixel of each row, in the order of x within each row's upper and lower side. */
function outerCorners(labels: Int32Array, { label, x0, x1, y0, y1 }: Component, width: number): Point[] {
  const points: Point[] = []
  for (let y = y0; y <= y1; y++) {
    let [first, last] = [x0, x1]
    while (first < x1 && labels[y * width + first] !== label) first++
    while (last > first && labels[y * width + last] !== label) last--
    points.push([first, y], [last + 1, y], [first, y + 1], [last + 1, y + 1])
  }
  return points
}

/** Convex hull by Andrew's monotone chain (Information Processing Letters 9(5):216–219, 1979), clockwise with y down. */
function convexHull(points: Point[]): Point[] {
  const sorted = [...points].sort((a, b) => a[0] - b[0] || a[1] - b[1])
  const chain = (ordered: Point[]): Point[] => {
    const out: Point[] = []
    for (const point of ordered) {
      while (out.length >= 2 && turn(out.at(-2)!, out.at(-1)!, point) <= 0) out.pop()
      out.push(point)
    }
    out.pop()
    return out
  }
  return [...chain(sorted), ...chain(sorted.reverse())]
}

const turn = (a: Point, b: Point, c: Point): number => (b[0] - a[0]) * (c[1] - a[1]) - (b[1] - a[1]) * (c[0] - a[0])

/** Area of a polygon, square pixels. */
export function areaOf(polygon: readonly Point[]): number {
  const twice = polygon.reduce((sum, [x, y], i) => {
    const [u, v] = polygon[(i + 1) % polygon.length]!
    return sum + x * v - u * y
  }, 0)
  return Math.abs(twice) / 2
}

function cheapestCorner(hull: Point[]): number {
  const n = hull.length
  let [best, least] = [0, Infinity]
  for (let i = 0; i < n; i++) {
    const cost = Math.abs(turn(hull[(i + n - 1) % n]!, hull[i]!, hull[(i + 1) % n]!))
    if (cost < least) [best, least] = [i, cost]
  }
  return best
}
