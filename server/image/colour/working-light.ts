import { d50, xyzFromSrgb } from '#shared/tone/colour-spaces'
import { type Matrix3, multiply, transform, type Vector3 } from '#shared/tone/matrix'
import { srgbToLinear } from '#shared/tone/srgb'
import { workingFromXyz } from '#shared/tone/working-space'
import type { ToneCurve } from './icc-curve'
import type { Profile } from './icc-profile'

/**
 * How a picture's stored codes become linear light of the working space: one curve a stored channel, then a matrix.
 * Grey pictures have one channel and a column of ones.
 */
export interface WorkingLight {
  curves: ToneCurve[]
  /** working-space channels (rows) by stored channels (columns) */
  matrix: readonly (readonly number[])[]
}

const fromColumns = ([r, g, b]: readonly [Vector3, Vector3, Vector3]): Matrix3 => [[r[0], g[0], b[0]], [r[1], g[1], b[1]], [r[2], g[2], b[2]]]

/** Profiles store the primaries in steps of 1/65536: a white that misses D50 by less than this is D50. */
const whiteTolerance = 0.002

/** Scales X, Y and Z so that the device's full white is exactly the connection space's white, where it was meant to be. */
function withExactWhite(xyzFromDevice: Matrix3): Matrix3 {
  const white = transform(xyzFromDevice, [1, 1, 1])
  if (white.some((v, i) => Math.abs(v - d50[i]!) > whiteTolerance)) return xyzFromDevice
  const gain = (i: 0 | 1 | 2) => d50[i] / white[i]
  return multiply([[gain(0), 0, 0], [0, gain(1), 0], [0, 0, gain(2)]], xyzFromDevice)
}

export const srgbLight: WorkingLight = { curves: [srgbToLinear, srgbToLinear, srgbToLinear], matrix: multiply(workingFromXyz, xyzFromSrgb) }
export const srgbGreyLight: WorkingLight = { curves: [srgbToLinear], matrix: [[1], [1], [1]] }

export function workingLightOf(profile: Extract<Profile, { kind: 'rgb' | 'grey' }>): WorkingLight {
  if (profile.kind === 'grey') return { curves: [profile.curve], matrix: [[1], [1], [1]] }
  return { curves: profile.curves, matrix: multiply(workingFromXyz, withExactWhite(fromColumns(profile.columns))) }
}

/**
 * Tables that turn stored codes into one linear value by adding up: `value = Σ table_c[code_c]`. The value is
 * Σ weight_i · working channel i, so a black-and-white mix and the colour conversion cost three look-ups together.
 * Nothing is clipped.
 */
export function lightTables(light: WorkingLight, weights: Vector3, greatest: 255 | 65535): Float32Array[] {
  return light.curves.map((curve, channel) => {
    const share = weights[0] * light.matrix[0]![channel]! + weights[1] * light.matrix[1]![channel]! + weights[2] * light.matrix[2]![channel]!
    return Float32Array.from({ length: greatest + 1 }, (_, code) => share * curve(code / greatest))
  })
}
