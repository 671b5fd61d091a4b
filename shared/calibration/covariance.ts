import { monomials } from './monomials'
import type { ToneWeights } from './tone-weights'
import type { WedgePrint } from './wedge-print'

/** Logarithms of: the mottle's variance over the noise's, and its reach along x and y in mm. */
export type FieldParameters = readonly [variance: number, reachX: number, reachY: number]

/** Share of a field that shows at any tone. */
const floor = 0.15
/** Variance of the smooth fields' coefficients over the noise's: a wide prior. */
const smoothVariance = 100

/**
 * Covariance of one print's patches over the noise's variance (N × N, by rows), before it depends on the mottle:
 * I + 100·P·Pᵀ, P = [(.15 + .85 w_e) · centred {x, y, x², xy, y²}, w_c · centred {x, y}] — light that falls off, coating that
 * runs out. `shift` adds a print's own exposure and coating: standard deviations over the noise's at the tone where each
 * shows most.
 */
export function smoothFields(print: WedgePrint, { coating, exposure }: ToneWeights, shift?: { exposure: number, coating: number }): Float64Array {
  const fields = fieldColumns(print, coating, exposure)
  if (shift) fields.push(exposure.map(w => w * shift.exposure), coating.map(w => w * shift.coating))
  const n = print.length
  const covariance = new Float64Array(n * n)
  for (let i = 0; i < n; i++) {
    covariance[i * n + i] = 1
    for (const field of fields) for (let j = 0; j <= i; j++) covariance[i * n + j]! += field[i]! * field[j]!
  }
  return covariance
}

/** The columns of P, times the root of their variance. */
function fieldColumns(print: WedgePrint, coating: Float64Array, exposure: Float64Array): Float64Array[] {
  const places = monomials(print, 2)
  const centred = [0, 1, 2, 3, 4].map((column) => {
    const values = Float64Array.from(print, (_, i) => places[5 * i + column]!)
    const mean = values.reduce((sum, v) => sum + v, 0) / values.length
    return values.map(v => (v - mean) * Math.sqrt(smoothVariance))
  })
  return [
    ...centred.map(column => column.map((v, i) => v * (floor + (1 - floor) * exposure[i]!))),
    ...centred.slice(0, 2).map(column => column.map((v, i) => v * coating[i]!)),
  ]
}

/**
 * Adds the mottle to `smoothFields` and gives the lower triangle of the whole covariance: ℓ_s·g gᵀ ∘ K, g = .15 + .85 w_c,
 * K Matérn's with ν = 3/2 (Rasmussen and Williams, Gaussian Processes for Machine Learning, 2006, 4.2.1) at the distance
 * √((Δx/ℓx)² + (Δy/ℓy)²).
 */
export function withMottle(smooth: Float64Array, print: WedgePrint, coating: Float64Array, [variance, reachX, reachY]: FieldParameters): Float64Array {
  const n = print.length
  const covariance = smooth.slice()
  const strength = coating.map(w => (floor + (1 - floor) * w) * Math.exp(variance / 2))
  const [xs, ys] = [Float64Array.from(print, p => p.xMm / Math.exp(reachX)), Float64Array.from(print, p => p.yMm / Math.exp(reachY))]
  for (let i = 0; i < n; i++) {
    for (let j = 0; j <= i; j++) {
      const [dx, dy] = [xs[i]! - xs[j]!, ys[i]! - ys[j]!]
      const distance = Math.sqrt(3 * (dx * dx + dy * dy))
      covariance[i * n + j]! += strength[i]! * strength[j]! * (1 + distance) * Math.exp(-distance)
    }
  }
  return covariance
}
