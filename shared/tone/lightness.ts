import { requireNumber } from './domain'

/** CIE 15:2004, 8.2.1.1: below this share of white's luminance L* is linear, (6/29)³. */
const linearBelow = 216 / 24389
/** L* per unit of relative luminance in the linear part, (29/3)³. */
const linearSlope = 24389 / 27
/** L* where both parts meet: 8. */
const linearBelowLightness = linearSlope * linearBelow

/**
 * CIE 1976 lightness L* (0 black … 100 white) of a luminance relative to white's.
 * Domain 0 … 10; 1 is the perfect diffuser, more gives an L* above 100.
 * Source: CIE 15:2004, 8.2.1.1, with the exact constants 216/24389 and 24389/27.
 * @throws ComputeError `invalid_input` outside the domain.
 */
export function lightnessFromLuminance(luminance: number): number {
  const y = requireNumber(luminance, 'Luminance', 0, 10)
  return y > linearBelow ? 116 * Math.cbrt(y) - 16 : linearSlope * y
}

/**
 * Luminance relative to white's of a CIE 1976 lightness: the inverse of `lightnessFromLuminance`.
 * Domain 0 … 234.
 * @throws ComputeError `invalid_input` outside the domain.
 */
export function luminanceFromLightness(lightness: number): number {
  const l = requireNumber(lightness, 'Lightness', 0, 234)
  return l > linearBelowLightness ? ((l + 16) / 116) ** 3 : l / linearSlope
}
