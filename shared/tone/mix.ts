import { ComputeError } from '../errors'
import { srgbFromXyz, xyzFromSrgb } from './colour-spaces'
import { requireNumber } from './domain'
import type { Vector3 } from './matrix'
import { multiply } from './matrix'
import { codeFromLinear, linearTable, xyzFromWorking } from './working-space'

/** Shares of red, green and blue light in the black-and-white picture; each −2 … 3, neutral 1. */
export interface Mix { red: number, green: number, blue: number }

/** The mix of neutral tones: luminance as the eye weighs it. */
export const neutralMix: Mix = { red: 1, green: 1, blue: 1 }
/** A mix whose channels cancel out beyond this has no tones left. */
export const leastMixLuminance = 0.05

/** Y of D50 XYZ per unit of linear sRGB red, green and blue. */
const luminance = xyzFromSrgb[1]
const srgbFromWorking = multiply(srgbFromXyz, xyzFromWorking)

/** Σ m_i·Y_i of a mix: what white would come to before the weights are scaled. */
export const mixLuminance = (mix: Mix): number =>
  mix.red * luminance[0] + mix.green * luminance[1] + mix.blue * luminance[2]

/**
 * Weights of the linear *working-space* channels whose sum is the picture's linear tone.
 * Formula: the mix weighs red, green and blue light of linear sRGB primaries (the channels a photographer knows; values
 * outside 0 … 1 are kept), w_i = m_i·Y_i / Σ m_j·Y_j with Y the luminance of each, so white stays white and (1, 1, 1) is
 * Y of D50 XYZ exactly. (1, 0, 0) is the sRGB red channel itself, as behind a red filter. Weights may be negative.
 * @throws ComputeError `invalid_input` for shares outside −2 … 3, or where Σ m_j·Y_j ≤ 0.05.
 */
export function mixWeights(mix: Mix): Vector3 {
  for (const channel of ['red', 'green', 'blue'] as const) requireNumber(mix[channel], `The mix's ${channel}`, -2, 3)
  const sum = mixLuminance(mix)
  if (sum <= leastMixLuminance) throw new ComputeError('invalid_input', 'This mix leaves no tones. Raise one of the channels.')
  const r = mix.red * luminance[0] / sum
  const g = mix.green * luminance[1] / sum
  const b = mix.blue * luminance[2] / sum
  const weight = (i: 0 | 1 | 2): number => r * srgbFromWorking[0][i] + g * srgbFromWorking[1][i] + b * srgbFromWorking[2][i]
  return [weight(0), weight(1), weight(2)]
}

/** Steps of the table below; linear interpolation between them errs by less than 0.01 code. */
const steps = 65536
let codeByLinear: Float32Array | undefined
function codeTable(): Float32Array {
  codeByLinear ??= Float32Array.from({ length: steps + 2 }, (_, i) => codeFromLinear(Math.min(i / steps, 1)))
  return codeByLinear
}

/**
 * Mixes interleaved 16-bit working-space codes (r, g, b, r, g, b …) to the 16-bit tone plane: round(65535 · L* / 100) of
 * the weighted linear sum, clipped to 0 … 1 after the mix. Writes `out` (one code a pixel) and nothing else.
 * Allocates nothing per pixel; runs in Node and in browser workers.
 * @throws ComputeError `invalid_input` when `channels` does not hold three codes for each of `out`.
 */
export function mixToTonePlane(channels: Uint16Array, weights: Vector3, out: Uint16Array): void {
  if (channels.length !== 3 * out.length) throw new ComputeError('invalid_input', 'The tone plane needs three channel codes a pixel.')
  const linear = linearTable()
  const codes = codeTable()
  const [red, green, blue] = weights
  for (let pixel = 0, channel = 0; pixel < out.length; pixel++, channel += 3) {
    const sum = red * linear[channels[channel]!]! + green * linear[channels[channel + 1]!]! + blue * linear[channels[channel + 2]!]!
    const place = (sum < 0 ? 0 : sum > 1 ? 1 : sum) * steps
    const below = place | 0
    const low = codes[below]!
    out[pixel] = low + (codes[below + 1]! - low) * (place - below) + 0.5
  }
}
