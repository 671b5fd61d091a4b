import { factorise, solveLower, solveUpper } from './cholesky'

/** A least-squares fit: where the sum of squares is least, half that sum, and the Cholesky factor of JᵀJ there. */
export interface SquaresFit { at: Float64Array, halfSquares: number, factor: Float64Array }

const passes = 100
/** Step of the forward differences; parameters should be of the size of 1. */
const difference = 1e-6
const [leastDamping, greatestDamping] = [1e-9, 1e9]

/**
 * The least sum of squared residuals by Levenberg and Marquardt's damped Gauss–Newton steps (Marquardt, SIAM J. Appl. Math.
 * 11(2):431–441, 1963; damping of the diagonal, ×4 and ÷4), Jacobian by forward differences. Residuals must be finite
 * near the start; a step to where they are not is refused.
 * @throws ComputeError `invalid_input` when the residuals leave a parameter undetermined.
 */
export function leastSquares(residuals: (at: Float64Array) => Float64Array, start: ArrayLike<number>): SquaresFit {
  let at: Float64Array = Float64Array.from(start)
  let values = residuals(at)
  let [cost, damping] = [halfSquares(values), 1e-3]
  let { normal, gradient } = normalEquations(residuals, at, values)
  for (let pass = 0; pass < passes && damping < greatestDamping; pass++) {
    const moved = stepped(at, normal, gradient, damping)
    const tried = residuals(moved)
    const triedCost = halfSquares(tried)
    if (!(triedCost <= cost)) {
      damping *= 4
      continue
    }
    const gain = cost - triedCost
    at = moved
    values = tried
    cost = triedCost
    damping = Math.max(leastDamping, damping / 4)
    ;({ normal, gradient } = normalEquations(residuals, at, values))
    if (gain < 1e-10 * (1 + cost)) break
  }
  return { at, halfSquares: cost, factor: factorise(normal, at.length) }
}

const halfSquares = (values: Float64Array): number => values.reduce((sum, v) => sum + v * v, 0) / 2

/** JᵀJ (by rows, whole) and Jᵀr. */
function normalEquations(residuals: (at: Float64Array) => Float64Array, at: Float64Array, values: Float64Array): { normal: Float64Array, gradient: Float64Array } {
  const n = at.length
  const columns = Array.from(at, (_, k) => {
    const moved = at.slice()
    moved[k]! += difference
    return residuals(moved).map((v, i) => (v - values[i]!) / difference)
  })
  const dot = (a: Float64Array, b: Float64Array): number => a.reduce((sum, v, i) => sum + v * b[i]!, 0)
  return {
    normal: Float64Array.from({ length: n * n }, (_, i) => dot(columns[Math.floor(i / n)]!, columns[i % n]!)),
    gradient: Float64Array.from(columns, column => dot(column, values)),
  }
}

function stepped(at: Float64Array, normal: Float64Array, gradient: Float64Array, damping: number): Float64Array {
  const n = at.length
  const damped = normal.map((v, i) => i % (n + 1) === 0 ? v * (1 + damping) + 1e-12 : v)
  const step = solveUpper(factorise(damped, n), n, solveLower(damped, n, gradient.slice()))
  return at.map((v, k) => v - step[k]!)
}
