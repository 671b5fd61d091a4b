import { ComputeError } from '../../errors'
import { solveLeastSquares } from './least-squares'
import type { Point } from './picture'

/** A perspective map of the plane: nine numbers by rows; (x, y) → ((h0 x + h1 y + h2) / w, (h3 x + h4 y + h5) / w), w = h6 x + h7 y + h8. */
export type Homography = readonly number[]

/** The image of a point. */
export function applyHomography(h: Homography, [x, y]: Point): [number, number] {
  const w = h[6]! * x + h[7]! * y + h[8]!
  return [(h[0]! * x + h[1]! * y + h[2]!) / w, (h[3]! * x + h[4]! * y + h[5]!) / w]
}

/** The map from the picture back to the page, up to scale: the adjugate. */
export function invertHomography(h: Homography): Homography {
  const [a, b, c, d, e, f, g, i, j] = h as number[] as [number, number, number, number, number, number, number, number, number]
  return [e * j - f * i, c * i - b * j, b * f - c * e, f * g - d * j, a * j - c * g, c * d - a * f, d * i - e * g, b * g - a * i, a * e - b * d]
}

/**
 * The perspective map that takes `from` to `to` best in the least-squares sense of distances in `to`; four pairs or more, no
 * three of the first four on a line. Direct linear transform on normalised points, reweighted by 1/w so that the algebraic
 * error becomes the distance (Hartley and Zisserman, Multiple View Geometry, 2nd ed., algorithm 4.2 and 4.2.4).
 * @throws ComputeError `invalid_input` with fewer or degenerate points.
 */
export function fitHomography(from: readonly Point[], to: readonly Point[]): Homography {
  if (from.length < 4) throw new ComputeError('invalid_input', 'A perspective map needs four points.')
  const [a, b] = [normalising(from), normalising(to)]
  const [p, q] = [from.map(point => applyHomography(a, point)), to.map(point => applyHomography(b, point))]
  let h: number[] = [1, 0, 0, 0, 1, 0, 0, 0, 1]
  for (let pass = 0; pass < 3; pass++) {
    const rows: number[][] = []
    const values: number[] = []
    const weights: number[] = []
    p.forEach(([x, y], i) => {
      const [u, v] = q[i]!
      const w = h[6]! * x + h[7]! * y + 1
      rows.push([x, y, 1, 0, 0, 0, -u * x, -u * y], [0, 0, 0, x, y, 1, -v * x, -v * y])
      values.push(u, v)
      weights.push(1 / (w * w), 1 / (w * w))
    })
    h = [...solveLeastSquares(rows, values, weights, 1e-12), 1]
  }
  return multiply(invertHomography(b), multiply(h, a))
}

/** Moves the centroid to 0 and scales the mean distance to √2. */
function normalising(points: readonly Point[]): Homography {
  const n = points.length
  const cx = points.reduce((sum, p) => sum + p[0], 0) / n
  const cy = points.reduce((sum, p) => sum + p[1], 0) / n
  const s = Math.SQRT2 * n / points.reduce((sum, p) => sum + Math.hypot(p[0] - cx, p[1] - cy), 0)
  return [s, 0, -s * cx, 0, s, -s * cy, 0, 0, 1]
}

function multiply(a: Homography, b: Homography): Homography {
  const out: number[] = []
  for (let i = 0; i < 3; i++) {
    for (let j = 0; j < 3; j++) out.push(a[3 * i]! * b[j]! + a[3 * i + 1]! * b[3 + j]! + a[3 * i + 2]! * b[6 + j]!)
  }
  return out
}
