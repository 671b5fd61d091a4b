import { d50 } from './colour-spaces'
import { luminanceFromLightness } from './lightness'
import type { LabPoint } from './looks'
import type { Vector3 } from './matrix'

/** XYZ (D50, white's Y = 1) of a CIELAB colour. Source: CIE 15:2004, 8.2.1.1; L* 0 … 100. */
export function xyzFromLab([l, a, b]: LabPoint): Vector3 {
  const y = (l + 16) / 116
  return [d50[0] * fromCubeRoot(y + a / 500), d50[1] * luminanceFromLightness(l), d50[2] * fromCubeRoot(y - b / 200)]
}

/** CIE 15:2004, 8.2.1.1: the inverse of f. */
const fromCubeRoot = (f: number): number => f > 6 / 29 ? f ** 3 : (116 * f - 16) * 27 / 24389

/** CIELAB of XYZ (D50, white's Y = 1); the inverse of `xyzFromLab`. Source: CIE 15:2004, 8.2.1.1. */
export function labFromXyz([x, y, z]: Vector3): [number, number, number] {
  const [fx, fy, fz] = [cubeRoot(x / d50[0]), cubeRoot(y), cubeRoot(z / d50[2])]
  return [116 * fy - 16, 500 * (fx - fy), 200 * (fy - fz)]
}

/** CIE 15:2004, 8.2.1.1: f. */
const cubeRoot = (t: number): number => t > 216 / 24389 ? Math.cbrt(t) : (24389 / 27 * t + 16) / 116
