import { responsePoints, valueAt } from '../tone/response'

/** How strongly a patch's lightness follows the coating's amount and the exposure; each at most 1 over all levels. */
export interface ToneWeights { coating: Float64Array, exposure: Float64Array }

/**
 * Weights of patches by a first fit of the response (1025 L*, never falling): with density D = −3 log₁₀((L* + 16)/116) and
 * S = (D − D_white)/(D_black − D_white), a change of coating moves lightness by ∝ (L* + 16)(D − D_white), a change of
 * exposure by ∝ (L* + 16)·S(1 − S) (the slope of a logistic in log exposure). Derived from L* + 16 ∝ 10^(−D/3).
 */
export function toneWeights(first: ArrayLike<number>, levels: ArrayLike<number>): ToneWeights {
  const [black, white] = [densityOf(first[0]!), densityOf(first[responsePoints - 1]!)]
  const [mostCoating, mostExposure] = [greatest(first, l => coatingEffect(l, white)), greatest(first, l => exposureEffect(l, white, black))]
  const at = (effect: (l: number) => number): Float64Array => Float64Array.from(levels, level => effect(valueAt(first, level)))
  return {
    coating: at(l => coatingEffect(l, white) / mostCoating),
    exposure: at(l => exposureEffect(l, white, black) / mostExposure),
  }
}

const densityOf = (lightness: number): number => -3 * Math.log10((lightness + 16) / 116)
const coatingEffect = (l: number, white: number): number => (l + 16) * Math.max(0, densityOf(l) - white)
const greatest = (values: ArrayLike<number>, effect: (l: number) => number): number => Math.max(1e-9, ...Array.from(values, effect))

function exposureEffect(l: number, white: number, black: number): number {
  const share = Math.min(1, Math.max(0, (densityOf(l) - white) / Math.max(1e-9, black - white)))
  return (l + 16) * share * (1 - share)
}
