import { densityFromLightness, lightnessFromDensity } from '../tone/density'
import { responsePoints, valueAt } from '../tone/response'
import { assumedFullInkDensity } from './starter'
import type { WedgePrint } from './wedge-print'

/** Standard deviations from one print of a bench to the next: of log₁₀ exposure, and of the coating's amount as a share. */
export interface PrintSpread { exposure: number, coating: number }

/** Until three prints tell: assumptions of ours, no source. */
export const assumedSpread: PrintSpread = { exposure: 0.02, coating: 0.01 }
/** So many prints are needed before they tell; the assumption then counts as so many more. */
const tellingPrints = 3
const assumptionCounts = 2

/**
 * L* by which the print's lightness at each of 1025 levels moves with log exposure and coating. More exposure is the same as
 * less ink, by the measured response itself: a log exposure of δ moves it by δ over the density of full ink, taken as 2.5 (the
 * starter curves' assumption) where it was not measured. Beyond clear film nothing is known: there it does not move. Coating
 * adds to the print's net density in proportion.
 */
export function lightnessShift(response: Float64Array, exposure: number, coating: number, fullInkDensity = assumedFullInkDensity): Float64Array {
  const paper = densityOf(response[responsePoints - 1]!)
  return response.map((lightness, i) => {
    const exposed = valueAt(response, i / (responsePoints - 1) - exposure / fullInkDensity)
    const coated = lightnessFromDensity(Math.min(6, Math.max(-1, densityOf(lightness) + coating * (densityOf(lightness) - paper))))
    return exposed + coated - 2 * lightness
  })
}

const densityOf = (lightness: number): number => densityFromLightness(Math.max(lightness, 1))

/** Standard deviations of lightness, L*, at the tones where exposure and coating each show most. */
export function greatestShifts(response: Float64Array, { exposure, coating }: PrintSpread): PrintSpread {
  const most = (shift: Float64Array): number => shift.reduce((max, v) => Math.max(max, Math.abs(v)), 0)
  return { exposure: most(lightnessShift(response, exposure, 0)), coating: most(lightnessShift(response, 0, coating)) }
}

/**
 * The spread as several prints of a bench tell it: each print's own exposure and coating by least squares from its patches'
 * distance to the common response, their variance about the prints' mean, with the assumption counted like two prints more.
 * The assumption itself for fewer than three prints.
 */
export function spreadOfPrints(prints: readonly WedgePrint[], response: Float64Array): { spread: PrintSpread, told: boolean } {
  if (prints.length < tellingPrints) return { spread: assumedSpread, told: false }
  const small = 0.01
  const [perExposure, perCoating] = [lightnessShift(response, small, 0), lightnessShift(response, 0, small)].map(shift => shift.map(v => v / small)) as [Float64Array, Float64Array]
  const shifts = prints.map(print => ownShift(print, response, perExposure, perCoating))
  const pooled = (assumed: number, values: number[]): number => {
    const mean = values.reduce((a, b) => a + b, 0) / values.length
    const squares = values.reduce((sum, v) => sum + (v - mean) ** 2, 0)
    return Math.sqrt((assumptionCounts * assumed ** 2 + squares) / (assumptionCounts + values.length - 1))
  }
  return { spread: { exposure: pooled(assumedSpread.exposure, shifts.map(s => s.exposure)), coating: pooled(assumedSpread.coating, shifts.map(s => s.coating)) }, told: true }
}

/** A print's exposure and coating against the common response, by least squares. */
function ownShift(print: WedgePrint, response: Float64Array, perExposure: Float64Array, perCoating: Float64Array): PrintSpread {
  let [ee, cc, ec, er, cr] = [0, 0, 0, 0, 0]
  for (const { level, lightness } of print) {
    const [e, c, r] = [valueAt(perExposure, level), valueAt(perCoating, level), lightness - valueAt(response, level)]
    ee += e * e
    cc += c * c
    ec += e * c
    er += e * r
    cr += c * r
  }
  const determinant = Math.max(1e-9, ee * cc - ec * ec)
  return { exposure: (cc * er - ec * cr) / determinant, coating: (ee * cr - ec * er) / determinant }
}
