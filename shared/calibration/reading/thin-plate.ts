import { solveLinear } from './least-squares'
import type { Point } from './picture'

/** A smooth field of two-dimensional shifts. */
export type ShiftField = (point: Point) => [number, number]

/**
 * The shifts that pass near `shifts` at `points` with the least bending: a thin-plate spline, r² ln r plus an affine part
 * (Bookstein, IEEE PAMI 11(6):567–585, 1989), with `smoothing` added to the diagonal (0 = through the points exactly;
 * in the unit of coordinates scaled to about 1). At least three points that are not on one line.
 * @throws ComputeError `invalid_input` for degenerate points.
 */
export function thinPlate(points: readonly Point[], shifts: readonly Point[], smoothing: number): ShiftField {
  const scale = 1 / Math.max(...points.map(([x, y]) => Math.max(Math.abs(x), Math.abs(y))), 1e-9)
  const scaled = points.map(([x, y]): Point => [x * scale, y * scale])
  const xs = solveSpline(scaled, shifts.map(shift => shift[0]), smoothing)
  const ys = solveSpline(scaled, shifts.map(shift => shift[1]), smoothing)
  const n = points.length
  return ([x, y]) => {
    const at: Point = [x * scale, y * scale]
    let dx = xs[n]! + xs[n + 1]! * at[0] + xs[n + 2]! * at[1]
    let dy = ys[n]! + ys[n + 1]! * at[0] + ys[n + 2]! * at[1]
    for (let i = 0; i < n; i++) {
      const u = bending(at, scaled[i]!)
      dx += xs[i]! * u
      dy += ys[i]! * u
    }
    return [dx, dy]
  }
}

function solveSpline(points: readonly Point[], values: readonly number[], smoothing: number): Float64Array {
  const n = points.length
  const size = n + 3
  const [a, b] = [new Float64Array(size * size), new Float64Array(size)]
  points.forEach((point, i) => {
    for (let j = 0; j < n; j++) a[i * size + j] = i === j ? smoothing : bending(point, points[j]!)
    const affine = [1, point[0], point[1]]
    affine.forEach((value, k) => {
      a[i * size + n + k] = value
      a[(n + k) * size + i] = value
    })
    b[i] = values[i]!
  })
  return solveLinear(a, b)
}

function bending(a: Point, b: Point): number {
  const square = (a[0] - b[0]) ** 2 + (a[1] - b[1]) ** 2
  return square === 0 ? 0 : square * Math.log(square) / 2
}
