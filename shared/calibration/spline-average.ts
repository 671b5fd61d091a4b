import { combine } from './bspline'
import { solveUpper } from './cholesky'
import type { SeededRandom } from './random'
import type { SplineCandidate } from './spline-candidates'

/** Candidates of less weight than this are left out. */
const leastWeight = 1e-3

/** A candidate and its share in the average; shares add up to 1. */
export interface WeighedCandidate { candidate: SplineCandidate, weight: number }

/** Weighs candidates by e^(−criterion/2) (Bayesian model averaging: Hoeting et al., Statistical Science 14(4):382–417, 1999). */
export function weighCandidates(candidates: readonly SplineCandidate[]): WeighedCandidate[] {
  const best = Math.min(...candidates.map(c => c.criterion))
  const weighed = candidates.map(candidate => ({ candidate, weight: Math.exp((best - candidate.criterion) / 2) }))
  const all = sumOf(weighed)
  const kept = weighed.filter(({ weight }) => weight / all > leastWeight)
  const sum = sumOf(kept)
  return kept.map(({ candidate, weight }) => ({ candidate, weight: weight / sum }))
}

const sumOf = (weighed: readonly WeighedCandidate[]): number => weighed.reduce((sum, { weight }) => sum + weight, 0)

/** The average curve; `grids[b]` is basis b at the wanted positions. */
export function averageCurve(weighed: readonly WeighedCandidate[], grids: readonly Float64Array[]): Float64Array {
  const first = combine(grids[0]!, weighed[0]!.candidate.coefficients)
  const mean = new Float64Array(first.length)
  for (const { candidate, weight } of weighed)
    combine(grids[candidate.basis]!, candidate.coefficients).forEach((value, i) => mean[i]! += weight * value)
  return mean
}

/** The mean of curves at the same positions. */
export function averageOf(curves: readonly Float64Array[]): Float64Array {
  return curves[0]!.map((_, i) => curves.reduce((sum, curve) => sum + curve[i]!, 0) / curves.length)
}

/**
 * Curves drawn from the mixture: each candidate by its weight, its coefficients α + spread·s·L⁻ᵀz with M = L·Lᵀ, z standard
 * normal. About `count` draws in all, each candidate in proportion; `spread` 1 is the posterior itself.
 */
export function drawCurves(weighed: readonly WeighedCandidate[], grids: readonly Float64Array[], count: number, spread: number, random: SeededRandom): Float64Array[] {
  return weighed.flatMap(({ candidate, weight }) =>
    Array.from({ length: Math.round(weight * count) }, () => combine(grids[candidate.basis]!, drawCoefficients(candidate, spread, random))))
}

function drawCoefficients({ coefficients, variance, factor }: SplineCandidate, spread: number, random: SeededRandom): Float64Array {
  const n = coefficients.length
  const step = solveUpper(factor, n, Float64Array.from({ length: n }, () => random.normal()))
  return step.map((value, i) => coefficients[i]! + spread * Math.sqrt(variance) * value)
}
