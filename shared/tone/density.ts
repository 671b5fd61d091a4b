import { requireNumber } from './domain'
import { lightnessFromLuminance, luminanceFromLightness } from './lightness'

/** The greatest density that this project reckons with; reflectance 10⁻⁶. */
const greatestDensity = 6
const leastReflectance = 10 ** -greatestDensity

/**
 * Absolute density of a reflectance (or transmittance) factor: D = −log₁₀ R (ISO 5-1:2009).
 * Domain 10⁻⁶ … 10 (a glossy white may exceed the perfect diffuser).
 * @throws ComputeError `invalid_input` outside the domain: black without any light has no density.
 */
export function densityFromReflectance(reflectance: number): number {
  return 0 - Math.log10(requireNumber(reflectance, 'Reflectance', leastReflectance, 10))
}

/**
 * Reflectance (or transmittance) factor of an absolute density, R = 10^(−D) (ISO 5-1:2009). Domain −1 … 6.
 * @throws ComputeError `invalid_input` outside the domain.
 */
export function reflectanceFromDensity(density: number): number {
  return 10 ** -requireNumber(density, 'Density', -1, greatestDensity)
}

/**
 * Absolute density of a neutral surface of CIE lightness L*, its luminance taken as its reflectance. Domain 0.001 … 200.
 * @throws ComputeError `invalid_input` outside the domain.
 */
export function densityFromLightness(lightness: number): number {
  return densityFromReflectance(luminanceFromLightness(requireNumber(lightness, 'Lightness', 0.001, 200)))
}

/**
 * CIE lightness L* of a neutral surface of absolute density D: L*(10^(−D)). Domain −1 … 6.
 * Holds for visual density and neutral prints; a density read through a colour filter gives that channel's own "lightness".
 * @throws ComputeError `invalid_input` outside the domain.
 */
export function lightnessFromDensity(density: number): number {
  return lightnessFromLuminance(reflectanceFromDensity(density))
}
