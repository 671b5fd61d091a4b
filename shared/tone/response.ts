import { ComputeError } from '../errors'

/** Points of a bench's response and of a curve: equal steps from 0 to 1, both ends included. */
export const responsePoints = 1025
const lastPoint = responsePoints - 1

/** A bench's response: print lightness L* at 1025 equal steps of ink level, clear film first, never falling. */
export type Response = ArrayLike<number>

/**
 * Gives the response back when it is one.
 * @throws ComputeError `invalid_input` unless it has 1025 finite values that never fall, `range_too_small` when all are equal.
 */
export function requireResponse(response: Response): Response {
  if (response.length !== responsePoints) throw new ComputeError('invalid_input', `A response has ${responsePoints} values.`)
  for (let i = 0; i < responsePoints; i++) {
    if (!Number.isFinite(response[i])) throw new ComputeError('invalid_input', `Value ${i} of the response is not a number.`)
    if (i > 0 && response[i]! < response[i - 1]!) throw new ComputeError('invalid_input', `The response falls at value ${i}.`)
  }
  if (response[0]! >= response[lastPoint]!) throw new ComputeError('range_too_small', 'The response is flat: its lightest tone is not lighter than its deepest.')
  return response
}

/** Value at a position 0 … 1 between equal steps, by linear interpolation; clamped at the ends. */
export function valueAt(values: ArrayLike<number>, position: number): number {
  const last = values.length - 1
  const place = Math.min(1, Math.max(0, position)) * last
  const below = Math.min(last - 1, Math.floor(place))
  return place === last ? values[last]! : values[below]! + (values[below + 1]! - values[below]!) * (place - below)
}

/** `valueAt` of many positions 0 … 1, which are not checked; for whole tables. */
export function interpolateAll(values: ArrayLike<number>, positions: ArrayLike<number>): Float64Array {
  const last = values.length - 1
  // One step beyond the end, level with it, so that the last position needs no case of its own.
  const padded = new Float64Array(values.length + 1)
  padded.set(values)
  padded[last + 1] = values[last]!
  const found = new Float64Array(positions.length)
  for (let i = 0; i < found.length; i++) {
    const place = positions[i]! * last
    const below = place | 0
    const low = padded[below]!
    found[i] = low + (padded[below + 1]! - low) * (place - below)
  }
  return found
}

/**
 * Position 0 … 1 at which never-falling values reach `value`, by linear interpolation between equal steps: the inverse of
 * `valueAt`. Clamped: at or below the first value 0, at or above the last 1. Where values stay level, the least position.
 */
export function positionOf(values: ArrayLike<number>, value: number): number {
  const last = values.length - 1
  if (!(value > values[0]!)) return 0
  if (value >= values[last]!) return 1
  let [below, above] = [0, last]
  while (above - below > 1) {
    const middle = (below + above) >> 1
    if (values[middle]! < value) below = middle
    else above = middle
  }
  return (below + (value - values[below]!) / (values[above]! - values[below]!)) / last
}
