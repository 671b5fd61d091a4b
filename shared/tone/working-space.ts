import { d50, xyzMatrix } from './colour-spaces'
import type { Primaries } from './colour-spaces'
import { requireNumber } from './domain'
import { lightnessFromLuminance, luminanceFromLightness } from './lightness'
import type { Matrix3, Vector3 } from './matrix'
import { invert } from './matrix'

/**
 * The working space: primaries of ROMM RGB (ISO 22028-2:2013, table 1), white D50, every channel coded as the L* of its
 * linear value. It holds Adobe RGB whole; the blue channel of pure reds and cyans of Display P3 and Rec. 2020 leaves it by 0.003
 * at most, which is less than 10⁻⁶ of luminance. So nothing that can be seen is clipped before the black-and-white mix.
 */
export const workingPrimaries: Primaries = [[0.7347, 0.2653], [0.1596, 0.8404], [0.0366, 0.0001]]

/** D50 XYZ of linear working-space channels, and back. */
export const xyzFromWorking: Matrix3 = xyzMatrix(workingPrimaries, d50)
export const workingFromXyz: Matrix3 = invert(xyzFromWorking)

/** Y of D50 XYZ per unit of each linear channel; they add up to 1. */
export const workingLuminanceRow: Vector3 = xyzFromWorking[1]

/** The greatest 16-bit code. */
export const greatestCode = 65535

/**
 * 16-bit code (0 … 65535, not rounded) of a linear channel value 0 … 1: 65535 · L*(linear) / 100.
 * @throws ComputeError `invalid_input` outside the domain.
 */
export function codeFromLinear(linear: number): number {
  return greatestCode * lightnessFromLuminance(requireNumber(linear, 'A linear channel', 0, 1)) / 100
}

/**
 * Linear channel value 0 … 1 of a 16-bit code (fractions allowed): the inverse of `codeFromLinear`.
 * @throws ComputeError `invalid_input` outside the domain.
 */
export function linearFromCode(code: number): number {
  return luminanceFromLightness(100 * requireNumber(code, 'A code', 0, greatestCode) / greatestCode)
}

let linearByCode: Float32Array | undefined

/** `linearFromCode` of all 65 536 codes, made once. Shared: read only. */
export function linearTable(): Float32Array {
  linearByCode ??= Float32Array.from({ length: greatestCode + 1 }, (_, code) => linearFromCode(code))
  return linearByCode
}
