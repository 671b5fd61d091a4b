import { ComputeError } from '../errors'

/**
 * Weighted least-squares fit that never falls, by pooling adjacent violators (Barlow, Bartholomew, Bremner and Brunk,
 * Statistical Inference under Order Restrictions, 1972, 1.2). Input is not changed. Without weights all count 1.
 * @throws ComputeError `invalid_input` for values or weights that are not finite, or weights that are not positive.
 */
export function isotonic(values: ArrayLike<number>, weights?: ArrayLike<number>): Float64Array {
  const n = values.length
  const [means, masses, ends] = [new Float64Array(n), new Float64Array(n), new Int32Array(n)]
  let blocks = 0
  for (let i = 0; i < n; i++) {
    const [value, weight] = [values[i]!, weights ? weights[i]! : 1]
    if (!Number.isFinite(value) || !Number.isFinite(weight) || weight <= 0) throw new ComputeError('invalid_input', 'An isotonic fit needs finite values and positive weights.')
    means[blocks] = value
    masses[blocks] = weight
    ends[blocks++] = i + 1
    while (blocks > 1 && means[blocks - 2]! > means[blocks - 1]!) {
      pool(means, masses, blocks - 2)
      ends[blocks - 2] = i + 1
      blocks--
    }
  }
  const fit = new Float64Array(n)
  for (let block = 0, start = 0; block < blocks; start = ends[block++]!) fit.fill(means[block]!, start, ends[block])
  return fit
}

/** Joins block `b + 1` to block `b`. */
function pool(means: Float64Array, masses: Float64Array, b: number): void {
  const mass = masses[b]! + masses[b + 1]!
  means[b] = (masses[b]! * means[b]! + masses[b + 1]! * means[b + 1]!) / mass
  masses[b] = mass
}
