import type { ReadingChannel } from '../schemas/benches'
import type { Aim } from '../schemas/curves'
import { ComputeError } from '../errors'
import { densityFromLightness, lightnessFromDensity } from './density'
import { requireNumber } from './domain'
import { lightnessFromLuminance, luminanceFromLightness } from './lightness'

/** Below this L* (absolute density about 4) *even density* takes no lower value: black without light has no density. */
const leastLightnessWithDensity = 0.09

/**
 * The print's wanted lightness L* for a tone 0 (deepest) … 1 (paper white), between the bench's deepest and lightest.
 *
 * - *even lightness*: L* = L_k + t·(L_w − L_k)
 * - *keep middle tones*: the same straight line in luminance, Y = Y_k + Y(100·t)·(Y_w − Y_k)
 * - *even density*: the same in density, D = D_k + t·(D_w − D_k)
 *
 * Strictly increasing in `tone`; exact at both ends.
 * @throws ComputeError `invalid_input` for values outside 0 … 1 or 0 … 100, `range_too_small` when white is not lighter than black.
 */
export function printLightnessForTone(tone: number, aim: Aim, blackLightness: number, whiteLightness: number): number {
  return aimCurve(aim, blackLightness, whiteLightness)(requireNumber(tone, 'Tone', 0, 1))
}

/**
 * `printLightnessForTone` with the ends checked and converted once; for whole tables. The function given back takes tones
 * 0 … 1 and does not check them.
 * @throws ComputeError as `printLightnessForTone`.
 */
export function aimCurve(aim: Aim, blackLightness: number, whiteLightness: number): (tone: number) => number {
  const [black, white] = [requireNumber(blackLightness, 'The deepest lightness', 0, 100), requireNumber(whiteLightness, 'The lightest lightness', 0, 100)]
  if (black >= white) throw new ComputeError('range_too_small', 'The lightest tone must be lighter than the deepest.')
  const between = curves[aim](black, white)
  return tone => tone <= 0 ? black : tone >= 1 ? white : between(tone)
}

const curves: Record<Aim, (black: number, white: number) => (tone: number) => number> = {
  'even-lightness': (black, white) => tone => black + tone * (white - black),
  'keep-middle-tones': (black, white) => {
    const [darkest, lightest] = [luminanceFromLightness(black), luminanceFromLightness(white)]
    return tone => lightnessFromLuminance(darkest + luminanceFromLightness(100 * tone) * (lightest - darkest))
  },
  'even-density': (black, white) => {
    const densest = densityFromLightness(Math.max(black, leastLightnessWithDensity))
    const thinnest = densityFromLightness(Math.max(white, leastLightnessWithDensity))
    return tone => lightnessFromDensity(densest + tone * (thinnest - densest))
  },
}

/** In a density channel every aim is linear in that density; in the others the wanted aim holds. */
export const aimForChannel = (aim: Aim, channel: ReadingChannel): Aim => channel.startsWith('density-') ? 'even-density' : aim
