import { ComputeError } from '../errors'
import { requireNumber } from './domain'
import { greatestCode } from './working-space'

/** What changes the tones after the mix; the formulas are `adjustTone`'s. */
export interface ToneAdjustments {
  /** tone that becomes black; 0 … 0.9, neutral 0 */
  blackPoint: number
  /** tone that becomes white; 0.1 … 1, neutral 1, at least 0.05 above the black point */
  whitePoint: number
  /** −1 … 1, neutral 0; positive lightens the middle: +1 takes the square root, −1 the square */
  midtone: number
  /** −1 … 1, neutral 0; positive steepens the middle (slope 2.07 at +1), negative flattens it (0.48 at −1) */
  contrast: number
}

export const neutralAdjustments: Readonly<ToneAdjustments> = { blackPoint: 0, whitePoint: 1, midtone: 0, contrast: 0 }

/** The least distance of white point and black point. */
export const leastPointDistance = 0.05
/** Whether the white point lies far enough above the black point; 0.95 and 0.9 do, whatever their last bit. */
export const arePointsApart = ({ blackPoint, whitePoint }: Pick<ToneAdjustments, 'blackPoint' | 'whitePoint'>): boolean =>
  whitePoint - blackPoint >= leastPointDistance - 1e-9
/** Steepness of the sigmoid at contrast ±1. */
const fullContrast = 4
/** Contrast below this is neutral: the sigmoid's own rounding would exceed its effect. */
const leastContrast = 1e-6

/**
 * The adjusted tone, 0 … 1, of a tone 0 … 1. Three steps, each monotone, each the identity at its neutral value:
 *
 * 1. points: t₁ = (t − black) / (white − black), clipped to 0 … 1;
 * 2. middle: t₂ = t₁^(2^−midtone), which keeps 0 and 1;
 * 3. contrast, with a = 4·|contrast|: t₃ = ½ + ½·tanh(a(t₂ − ½)) / tanh(a/2) where positive, and that function's inverse,
 *    t₃ = ½ + artanh((2t₂ − 1)·tanh(a/2)) / a, where negative; both keep 0, ½ and 1. Below |contrast| 10⁻⁶ it is left out.
 *
 * @throws ComputeError `invalid_input` for a tone or a setting outside its range.
 */
export function adjustTone(tone: number, adjustments: ToneAdjustments): number {
  return adjustAll(Float64Array.of(requireNumber(tone, 'Tone', 0, 1)), adjustments)[0]!
}

/**
 * `adjustTone` of the tone of each of the 65 536 codes of the tone plane, tone = code / 65535.
 * @throws ComputeError `invalid_input` for a setting outside its range.
 */
export function adjustedTones(adjustments: ToneAdjustments): Float64Array {
  const tones = new Float64Array(greatestCode + 1)
  for (let code = 0; code <= greatestCode; code++) tones[code] = code / greatestCode
  return adjustAll(tones, adjustments)
}

/** The three steps on all tones, in place; a neutral step is left out, so that it changes no bit. */
function adjustAll(tones: Float64Array, adjustments: ToneAdjustments): Float64Array {
  requireAdjustments(adjustments)
  const { blackPoint, whitePoint, midtone, contrast } = adjustments
  if (blackPoint !== 0 || whitePoint !== 1) stretch(tones, blackPoint, whitePoint)
  if (midtone !== 0) bend(tones, 2 ** -midtone)
  if (contrast > leastContrast) steepen(tones, fullContrast * contrast)
  if (contrast < -leastContrast) flatten(tones, -fullContrast * contrast)
  return tones
}

/** @throws ComputeError `invalid_input` for a setting outside its range. */
function requireAdjustments({ blackPoint, whitePoint, midtone, contrast }: ToneAdjustments): void {
  requireNumber(blackPoint, 'The black point', 0, 0.9)
  requireNumber(whitePoint, 'The white point', 0.1, 1)
  requireNumber(midtone, 'The middle tones', -1, 1)
  requireNumber(contrast, 'Contrast', -1, 1)
  if (!arePointsApart({ blackPoint, whitePoint }))
    throw new ComputeError('invalid_input', `The white point must lie at least ${leastPointDistance} above the black point.`)
}

function stretch(tones: Float64Array, black: number, white: number): void {
  for (let i = 0; i < tones.length; i++) tones[i] = within((tones[i]! - black) / (white - black))
}

function bend(tones: Float64Array, exponent: number): void {
  for (let i = 0; i < tones.length; i++) tones[i] = tones[i]! ** exponent
}

function steepen(tones: Float64Array, steepness: number): void {
  const end = Math.tanh(steepness / 2)
  for (let i = 0; i < tones.length; i++) tones[i] = within((1 + Math.tanh(steepness * (tones[i]! - 0.5)) / end) / 2)
}

function flatten(tones: Float64Array, steepness: number): void {
  const end = Math.tanh(steepness / 2)
  // Not steepness / 2, from which rounding may part it: both ends must come out exactly.
  const full = Math.atanh(end)
  for (let i = 0; i < tones.length; i++) tones[i] = within((1 + Math.atanh((2 * tones[i]! - 1) * end) / full) / 2)
}

const within = (tone: number): number => tone > 0 ? (tone < 1 ? tone : 1) : 0
