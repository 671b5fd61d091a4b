import { ComputeError } from '../errors'
import { requireNumber } from './domain'

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
 *    t₃ = ½ + artanh((2t₂ − 1)·tanh(a/2)) / a, where negative; both keep 0, ½ and 1.
 *
 * @throws ComputeError `invalid_input` for a tone or a setting outside its range.
 */
export function adjustTone(tone: number, adjustments: ToneAdjustments): number {
  return toneAdjuster(adjustments)(requireNumber(tone, 'Tone', 0, 1))
}

/**
 * `adjustTone` with the settings checked and their constants made once; for whole tables.
 * The function given back takes tones 0 … 1 and does not check them.
 * @throws ComputeError `invalid_input` for a setting outside its range.
 */
export function toneAdjuster(adjustments: ToneAdjustments): (tone: number) => number {
  requireAdjustments(adjustments)
  const { blackPoint, whitePoint, midtone, contrast } = adjustments
  const distance = whitePoint - blackPoint
  const exponent = 2 ** -midtone
  const bend = contrastCurve(contrast)
  return (tone) => {
    const stretched = (tone - blackPoint) / distance
    if (stretched <= 0) return 0
    if (stretched >= 1) return 1
    return bend(exponent === 1 ? stretched : stretched ** exponent)
  }
}

/** @throws ComputeError `invalid_input` for a setting outside its range. */
function requireAdjustments({ blackPoint, whitePoint, midtone, contrast }: ToneAdjustments): void {
  requireNumber(blackPoint, 'The black point', 0, 0.9)
  requireNumber(whitePoint, 'The white point', 0.1, 1)
  requireNumber(midtone, 'The middle tones', -1, 1)
  requireNumber(contrast, 'Contrast', -1, 1)
  if (whitePoint - blackPoint < leastPointDistance - Number.EPSILON)
    throw new ComputeError('invalid_input', `The white point must lie at least ${leastPointDistance} above the black point.`)
}

function contrastCurve(contrast: number): (tone: number) => number {
  const steepness = fullContrast * Math.abs(contrast)
  if (steepness < leastContrast) return tone => tone
  const end = Math.tanh(steepness / 2)
  const curve = contrast > 0
    ? (tone: number) => 0.5 + Math.tanh(steepness * (tone - 0.5)) / (2 * end)
    : (tone: number) => 0.5 + Math.atanh((2 * tone - 1) * end) / steepness
  return tone => Math.min(1, Math.max(0, curve(tone)))
}
