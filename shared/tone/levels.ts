import type { Aim } from '../schemas/curves'
import { ComputeError } from '../errors'
import type { ToneAdjustments } from './adjustments'
import { adjustedTones } from './adjustments'
import { aimCurve } from './aims'
import { requireNumber } from './domain'
import type { Response } from './response'
import { interpolateAll, positionOf, requireResponse, responsePoints } from './response'
import { greatestCode } from './working-space'

/** What decides a negative's ink levels, tone by tone. */
export interface LevelSettings {
  adjustments: ToneAdjustments
  aim: Aim
  response: Response
}

/**
 * Ink level 0 (clear) … 1 (full) that gives a print lightness L*, by linear interpolation in the response. Clamped: 0 at or
 * below the deepest lightness, 1 at or above the lightest; the least level where the response stays level.
 * @throws ComputeError when the response is not one or the lightness not a finite number.
 */
export function inkLevelForLightness(response: Response, lightness: number): number {
  return positionOf(requireResponse(response), requireNumber(lightness, 'Lightness', -1000, 1000))
}

/**
 * The curve: ink level at 1025 equal steps of tone, 0 (deepest) first. Straight lines between these points *are* the curve,
 * for every file, table and preview.
 * @throws ComputeError when the response is not one.
 */
export function curveLevels(response: Response, aim: Aim): Float64Array {
  requireResponse(response)
  const wanted = aimCurve(aim, response[0]!, response[responsePoints - 1]!)
  return Float64Array.from({ length: responsePoints }, (_, i) => i === 0 ? deepestLevel(response) : positionOf(response, wanted(i / (responsePoints - 1))))
}

/** The greatest level that still prints as deep as clear film: where a print reverses its shadows, the curve starts there. */
function deepestLevel(response: Response): number {
  let last = 0
  while (response[last + 1] === response[0]) last++
  return last / (responsePoints - 1)
}

/**
 * Ink level 0 … 1 for each of the 65 536 codes of the tone plane (tone = code / 65535), never falling. `tones` spares
 * making `adjustedTones(adjustments)` twice.
 * @throws ComputeError for a setting out of range or a response that is not one.
 */
export function buildLevelTable({ adjustments, aim, response }: LevelSettings, tones = adjustedTones(adjustments)): Float64Array {
  return interpolateAll(curveLevels(response, aim), tones)
}

/**
 * Forecast print lightness L* for each of the 65 536 codes of the tone plane: the response at the level that the film gets.
 * `levels` spares making `buildLevelTable(settings)` twice.
 * @throws ComputeError as `buildLevelTable`.
 */
export function buildForecastTable(settings: LevelSettings, levels = buildLevelTable(settings)): Float64Array {
  return interpolateAll(requireResponse(settings.response), levels)
}

/**
 * 16-bit film codes of ink levels, for one channel of the ink's colour: round(65535 · (1 − level · (1 − c/255))).
 * `inkChannel` is c, 0 … 255: 0 for black ink and for each channel the ink takes away whole. Black ink's full level is 0.
 * @throws ComputeError `invalid_input` for a channel outside 0 … 255.
 */
export function filmCodes(levels: Float64Array, inkChannel = 0): Uint16Array {
  const taken = 1 - requireNumber(inkChannel, 'A channel of the ink colour', 0, 255) / 255
  const codes = new Uint16Array(levels.length)
  for (let i = 0; i < codes.length; i++) codes[i] = Math.round(greatestCode * (1 - levels[i]! * taken))
  return codes
}

/** The three channels 0 … 255 of an ink colour written `#rrggbb`. @throws ComputeError `invalid_input` for another form. */
export function inkChannels(color: string): [number, number, number] {
  const parts = /^#([0-9a-f]{2})([0-9a-f]{2})([0-9a-f]{2})$/i.exec(color)
  if (!parts) throw new ComputeError('invalid_input', 'Write the ink colour as #rrggbb.')
  return [Number.parseInt(parts[1]!, 16), Number.parseInt(parts[2]!, 16), Number.parseInt(parts[3]!, 16)]
}
