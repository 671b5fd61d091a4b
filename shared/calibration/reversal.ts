import type { Warning } from '../schemas/curves'
import { responsePoints } from '../tone/response'

/** A print that gets lighter again where it should be darkest. */
export interface Reversal {
  /** level at which the print is darkest; the curve starts there */
  level: number
  /** how much lighter clear film prints, L* */
  rise: number
  /** `rise` over its standard deviation */
  significance: number
}

/** From these on a reversal is told: 2.5 standard deviations and half an L*. */
const leastSignificance = 2.5
const leastRise = 0.5

/**
 * Whether shadows reverse: n_r = argmin f over n < ½, Δ = f(0) − f(n_r), z = Δ / sd(Δ) over the draws; told when z > 2.5 and
 * Δ > 0.5 L*. `raw` is the fit before its isotonic guard, at 1025 levels, `draws` curves that could be the true one.
 */
export function findReversal(raw: Float64Array, draws: readonly Float64Array[]): Reversal | null {
  let darkest = 0
  for (let i = 1; i < responsePoints >> 1; i++) if (raw[i]! < raw[darkest]!) darkest = i
  const rise = raw[0]! - raw[darkest]!
  if (rise <= leastRise) return null
  const rises = draws.map(draw => draw[0]! - draw[darkest]!)
  const mean = rises.reduce((sum, v) => sum + v, 0) / rises.length
  const deviation = Math.sqrt(rises.reduce((sum, v) => sum + (v - mean) ** 2, 0) / (rises.length - 1))
  const significance = rise / deviation
  return significance > leastSignificance ? { level: darkest / (responsePoints - 1), rise, significance } : null
}

/** A response that starts at a level: what lies before it prints no darker, so it counts as the tone there. */
export function startingAt(response: Float64Array, level: number): Float64Array {
  const first = Math.round(level * (responsePoints - 1))
  return response.map((value, i) => i < first ? response[first]! : Math.max(value, response[first]!))
}

/** What to do about a reversal, the harmless causes first. */
export function reversalWarning({ level, rise }: Reversal): Warning {
  return {
    code: 'reversal',
    message: `Clear film prints ${rise.toFixed(1)} L* lighter than ${(100 * level).toFixed(0)} % ink. Has the print dried and oxidised (a day, or weak peroxide)? Bronzing reads lighter too. Read it again then; only if it still reverses, expose less. This curve starts at ${(100 * level).toFixed(0)} % ink.`,
  }
}
