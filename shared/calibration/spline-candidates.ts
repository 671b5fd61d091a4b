import { differencePenalty } from './bspline'
import { factorise, logDeterminant, solveLower, solveUpper } from './cholesky'

/** Order of the penalised differences: what is not bent is a parabola. */
export const penaltyOrder = 3
/** Smoothing weights that are tried: 10⁻⁶ … 10⁷ by half powers of ten. */
const smoothings = Array.from({ length: 27 }, (_, i) => 10 ** (-6 + i / 2))
/** No reading is finer than this, L*; keeps noise-free data from a vanishing residual. */
const leastDeviation = 0.01

/** A penalised spline for one basis and one smoothing weight. */
export interface SplineCandidate {
  /** which of the bases */
  basis: number
  smoothing: number
  /** −2 ln of its restricted likelihood, but for a constant; smaller is better */
  criterion: number
  coefficients: Float64Array
  /** residual variance */
  variance: number
  /** Cholesky factor of BᵀB + λ·DᵀD */
  factor: Float64Array
}

/**
 * P-splines of values `y` over each basis (rows × columns, by rows) with each smoothing weight, judged by restricted maximum
 * likelihood: (N−3) ln(rss/(N−3)) + ln|M| − (K−3) ln λ with M = BᵀB + λ·D₃ᵀD₃, α = M⁻¹Bᵀy, rss = yᵀy − yᵀBα
 * (Wood, Generalized Additive Models, 2nd ed., 6.2.6, of a Gaussian model with its variance profiled out).
 */
export function splineCandidates(bases: readonly Float64Array[], y: Float64Array): SplineCandidate[] {
  const columns = bases[0]!.length / y.length
  const penalty = { matrix: differencePenalty(columns, penaltyOrder), splines: columns, order: penaltyOrder }
  return bases.flatMap((basis, index) => {
    const equations = normalEquations(basis, y, columns)
    return smoothings.map(smoothing => ({ basis: index, smoothing, ...penalisedFit(equations, penalty, smoothing) }))
  })
}

/** BᵀB, Bᵀy, yᵀy and the number of rows. */
export interface NormalEquations { gram: Float64Array, moments: Float64Array, square: number, rows: number }

/** A penalty and how many of the columns it sees: the rest, beyond `splines`, are left unpenalised. */
export interface Penalty { matrix: Float64Array, splines: number, order: number }

/** The penalised least-squares fit α = (BᵀB + λ·P)⁻¹Bᵀy and what `SplineCandidate` keeps of it. */
export function penalisedFit({ gram, moments, square, rows }: NormalEquations, { matrix, splines, order }: Penalty, smoothing: number): Omit<SplineCandidate, 'basis' | 'smoothing'> {
  const columns = moments.length
  const factor = new Float64Array(gram.length)
  for (let i = 0; i < factor.length; i++) factor[i] = gram[i]! + smoothing * matrix[i]!
  const ridge = 1e-9 * trace(gram, columns) / columns
  for (let i = 0; i < columns; i++) factor[i * columns + i]! += ridge
  factorise(factor, columns)
  const coefficients = solveUpper(factor, columns, solveLower(factor, columns, moments.slice()))
  let explained = 0
  for (let i = 0; i < columns; i++) explained += moments[i]! * coefficients[i]!
  const freedom = Math.max(1, rows - order - (columns - splines))
  const variance = Math.max(square - explained, freedom * leastDeviation ** 2) / freedom
  const criterion = freedom * Math.log(variance) + logDeterminant(factor, columns) - (splines - order) * Math.log(smoothing)
  return { criterion, coefficients, variance, factor }
}

/** The smoothing weight of least criterion, for a design whose first `splines` columns are penalised by `matrix`. */
export function bestFit(design: Float64Array, y: Float64Array, matrix: Float64Array, splines: number): SplineCandidate {
  const equations = normalEquations(design, y, design.length / y.length)
  return smoothings
    .map(smoothing => ({ basis: 0, smoothing, ...penalisedFit(equations, { matrix, splines, order: penaltyOrder }, smoothing) }))
    .reduce((a, b) => b.criterion < a.criterion ? b : a)
}

/** The normal equations of a basis (rows × columns, by rows) and values. */
export function normalEquations(basis: Float64Array, y: Float64Array, columns: number): NormalEquations {
  const [gram, moments] = [new Float64Array(columns * columns), new Float64Array(columns)]
  let square = 0
  for (let row = 0, at = 0; row < y.length; row++, at += columns) {
    square += y[row]! * y[row]!
    for (let i = 0; i < columns; i++) {
      const value = basis[at + i]!
      if (value === 0) continue
      moments[i]! += value * y[row]!
      for (let j = 0; j <= i; j++) gram[i * columns + j]! += value * basis[at + j]!
    }
  }
  for (let i = 0; i < columns; i++) for (let j = i + 1; j < columns; j++) gram[i * columns + j] = gram[j * columns + i]!
  return { gram, moments, square, rows: y.length }
}

function trace(matrix: Float64Array, n: number): number {
  let sum = 0
  for (let i = 0; i < n; i++) sum += matrix[i * n + i]!
  return sum
}
