import { requireNumber } from './domain'

/**
 * Linear light (0 … 1) of an sRGB-encoded value (0 … 1). Source: IEC 61966-2-1:1999, thresholds 0.04045 and 0.0031308.
 * @throws ComputeError `invalid_input` outside the domain.
 */
export function srgbToLinear(encoded: number): number {
  const e = requireNumber(encoded, 'An sRGB value', 0, 1)
  return e <= 0.04045 ? e / 12.92 : ((e + 0.055) / 1.055) ** 2.4
}

/**
 * sRGB-encoded value (0 … 1) of linear light (0 … 1). Source: IEC 61966-2-1:1999.
 * @throws ComputeError `invalid_input` outside the domain.
 */
export function linearToSrgb(linear: number): number {
  const v = requireNumber(linear, 'A linear value', 0, 1)
  return v <= 0.0031308 ? v * 12.92 : 1.055 * v ** (1 / 2.4) - 0.055
}
