import { valueAt } from '../tone/response'
import { factorise, solveLower } from './cholesky'
import type { FieldParameters } from './covariance'
import { smoothFields, withMottle } from './covariance'
import { toneWeights } from './tone-weights'
import type { WedgePrint } from './wedge-print'

/** A suspect stays out when it lies beyond so many deviations of what its neighbours foretell. */
const dropBeyond = 4
/** Least deviation reckoned with, L*: a patch within 1 L* of what is foretold is always taken back. */
const leastDeviation = 0.25

/** A fit made without the suspects. */
export interface FitWithoutSuspects { response: Float64Array, field: FieldParameters, noise: number }

/**
 * Which patches of a print to use once a fit without the suspects is there: all that were sound, and those suspects whose
 * lightness agrees with what curve, smooth fields and mottle foretell for their place (kriging from the sound patches:
 * Cressie, Statistics for Spatial Data, 1993, 3.2). The rule that names suspects knows neither the mottle nor a steep tone:
 * without this second look it took honest patches for dirt, and always on the side that hurts.
 */
export function withSuspectsHeard(print: WedgePrint, sound: readonly boolean[], { response, field, noise }: FitWithoutSuspects): boolean[] {
  const order = [...print.keys()].sort((a, b) => Number(sound[b]) - Number(sound[a]) || a - b)
  const count = sound.filter(Boolean).length
  if (count === print.length) return [...sound]
  const patches = order.map(i => print[i]!)
  const n = patches.length
  const weights = toneWeights(response, patches.map(p => p.level))
  // The suspects come last: their rows of the factor hold their covariance with the sound patches, whitened.
  const factor = factorise(withMottle(smoothFields(patches, weights), patches, weights.coating, field), n)
  const residuals = Float64Array.from(patches, p => p.lightness - valueAt(response, p.level))
  const whitened = whiteningOf(factor, n, count, residuals)
  const used = [...sound]
  for (let row = count; row < n; row++) {
    let [foretold, variance] = [0, 0]
    for (let k = 0; k < count; k++) foretold += factor[row * n + k]! * whitened[k]!
    for (let k = count; k <= row; k++) variance += factor[row * n + k]! ** 2
    const deviation = Math.max(leastDeviation, noise * Math.sqrt(variance))
    used[order[row]!] = Math.abs(residuals[row]! - foretold) <= dropBeyond * deviation
  }
  return used
}

/** L⁻¹·r of the leading `count` patches. */
function whiteningOf(factor: Float64Array, n: number, count: number, residuals: Float64Array): Float64Array {
  const leading = new Float64Array(count * count)
  for (let row = 0; row < count; row++) leading.set(factor.subarray(row * n, row * n + count), row * count)
  return solveLower(leading, count, residuals.slice(0, count))
}
