import { ComputeError } from '../errors'
import { greatestCode } from './working-space'

/** A print tone this near to an end counts as that end: half an L* is hard to see between neighbours (common practice, no source). */
export const endNearness = 0.5

/** Shares 0 … 1 of the picture's pixels. */
export interface TonalLosses {
  /** prints as bare paper */
  barePaper: number
  /** prints as the deepest tone */
  deepest: number
}

/** Pixels of each of the 65 536 codes of a tone plane. */
export function toneHistogram(plane: Uint16Array): Uint32Array {
  const counts = new Uint32Array(greatestCode + 1)
  for (let i = 0; i < plane.length; i++) counts[plane[i]!]!++
  return counts
}

/**
 * What share of a picture comes out within 0.5 L* of bare paper, and of the deepest tone.
 * `histogram` counts pixels by tone code, `forecast` is `buildForecastTable`'s never-falling print lightness by tone code;
 * the bench's deepest and lightest L* are its response's ends. An empty picture loses nothing.
 * @throws ComputeError `invalid_input` unless both have 65 536 entries.
 */
export function tonalLosses(histogram: Uint32Array, forecast: Float64Array, blackLightness: number, whiteLightness: number): TonalLosses {
  if (histogram.length !== greatestCode + 1 || forecast.length !== greatestCode + 1)
    throw new ComputeError('invalid_input', 'A histogram and a forecast table have 65536 entries.')
  let [all, bare, deep] = [0, 0, 0]
  for (let code = 0; code <= greatestCode; code++) {
    const count = histogram[code]!
    all += count
    if (forecast[code]! >= whiteLightness - endNearness) bare += count
    if (forecast[code]! <= blackLightness + endNearness) deep += count
  }
  return all === 0 ? { barePaper: 0, deepest: 0 } : { barePaper: bare / all, deepest: deep / all }
}
