import type { Matrix3, Vector3 } from './matrix'
import { invert, multiply, transform } from './matrix'

/** CIE xy chromaticities of red, green and blue. */
export type Primaries = readonly [readonly [number, number], readonly [number, number], readonly [number, number]]

/** The profile connection space's white, XYZ of D50 (ICC.1:2022, 7.2.16), Y = 1. */
export const d50: Vector3 = [0.9642, 1, 0.8249]

/** White of sRGB, from its chromaticity 0.3127, 0.3290 (IEC 61966-2-1:1999). */
const d65: Vector3 = [0.3127 / 0.329, 1, (1 - 0.3127 - 0.329) / 0.329]
const srgbPrimaries: Primaries = [[0.64, 0.33], [0.3, 0.6], [0.15, 0.06]]

/** Cone responses of the linear Bradford transform (ICC.1:2022, annex E). */
const bradford: Matrix3 = [[0.8951, 0.2664, -0.1614], [-0.7502, 1.7135, 0.0367], [0.0389, -0.0685, 1.0296]]

/**
 * XYZ of linear RGB: the columns are the primaries, scaled so that (1, 1, 1) is the white
 * (SMPTE RP 177-1993, 3.3). Its middle row gives luminance.
 */
export function xyzMatrix(primaries: Primaries, white: Vector3): Matrix3 {
  const [red, green, blue] = primaries.map(([x, y]): Vector3 => [x / y, 1, (1 - x - y) / y]) as [Vector3, Vector3, Vector3]
  const columns: Matrix3 = [[red[0], green[0], blue[0]], [red[1], green[1], blue[1]], [red[2], green[2], blue[2]]]
  const [r, g, b] = transform(invert(columns), white)
  return multiply(columns, [[r, 0, 0], [0, g, 0], [0, 0, b]])
}

/** Linear Bradford adaptation of XYZ from one white to another. */
export function adaptation(from: Vector3, to: Vector3): Matrix3 {
  const [a, b] = [transform(bradford, from), transform(bradford, to)]
  const gains: Matrix3 = [[b[0] / a[0], 0, 0], [0, b[1] / a[1], 0], [0, 0, b[2] / a[2]]]
  return multiply(invert(bradford), multiply(gains, bradford))
}

/** D50 XYZ of linear sRGB. */
export const xyzFromSrgb: Matrix3 = multiply(adaptation(d65, d50), xyzMatrix(srgbPrimaries, d65))
/** Linear sRGB of D50 XYZ; colours outside its gamut fall outside 0 … 1. */
export const srgbFromXyz: Matrix3 = invert(xyzFromSrgb)
