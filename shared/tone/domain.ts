import { ComputeError } from '../errors'

/**
 * Gives `value` back when it is a number from `least` to `greatest` (both included).
 * @throws ComputeError `invalid_input` otherwise, NaN and infinities included; `what` names the value to a person.
 */
export function requireNumber(value: number, what: string, least: number, greatest: number): number {
  if (value >= least && value <= greatest) return value
  throw new ComputeError('invalid_input', `${what} must be a number from ${least} to ${greatest}, not ${value}.`)
}
