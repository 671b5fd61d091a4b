import { ComputeError } from '../../errors'
import { factorise, solveLower, solveUpper } from '../cholesky'

/**
 * The x that minimises Σ wᵢ (aᵢ·x − bᵢ)² + ridge · |x|², by the normal equations (Golub and Van Loan, Matrix Computations,
 * 4th ed., 5.3.2). `rows` holds the aᵢ, all of one length; weights default to 1. Columns should be of like size.
 * @throws ComputeError `invalid_input` when the rows leave x undetermined.
 */
export function solveLeastSquares(rows: readonly ArrayLike<number>[], b: ArrayLike<number>, weights?: ArrayLike<number>, ridge = 0): Float64Array {
  const n = rows[0]?.length ?? 0
  const [normal, right] = [new Float64Array(n * n), new Float64Array(n)]
  rows.forEach((row, i) => {
    const w = weights ? weights[i]! : 1
    if (w === 0) return
    for (let j = 0; j < n; j++) {
      const wj = w * row[j]!
      right[j]! += wj * b[i]!
      for (let k = 0; k <= j; k++) normal[j * n + k]! += wj * row[k]!
    }
  })
  for (let j = 0; j < n; j++) normal[j * n + j]! += ridge
  return solveUpper(factorise(normal, n), n, solveLower(normal, n, right))
}

/**
 * Solves the square system A·x = b by elimination with partial pivoting (ibid., 3.4.1); for small systems that are not
 * positive definite. `a` (n × n by rows) and `b` are overwritten; `b` becomes x.
 * @throws ComputeError `invalid_input` when the matrix is singular.
 */
export function solveLinear(a: Float64Array, b: Float64Array): Float64Array {
  const n = b.length
  for (let k = 0; k < n; k++) {
    let pivot = k
    for (let i = k + 1; i < n; i++) if (Math.abs(a[i * n + k]!) > Math.abs(a[pivot * n + k]!)) pivot = i
    if (Math.abs(a[pivot * n + k]!) < 1e-12) throw new ComputeError('invalid_input', 'These points leave the map without a unique answer.')
    if (pivot !== k) swapRows(a, b, n, k, pivot)
    for (let i = k + 1; i < n; i++) {
      const factor = a[i * n + k]! / a[k * n + k]!
      if (factor === 0) continue
      for (let j = k; j < n; j++) a[i * n + j]! -= factor * a[k * n + j]!
      b[i]! -= factor * b[k]!
    }
  }
  return solveUpperRows(a, b, n)
}

function swapRows(a: Float64Array, b: Float64Array, n: number, i: number, k: number): void {
  for (let j = 0; j < n; j++) [a[i * n + j], a[k * n + j]] = [a[k * n + j]!, a[i * n + j]!]
  ;[b[i], b[k]] = [b[k]!, b[i]!]
}

function solveUpperRows(a: Float64Array, b: Float64Array, n: number): Float64Array {
  for (let i = n - 1; i >= 0; i--) {
    let sum = b[i]!
    for (let j = i + 1; j < n; j++) sum -= a[i * n + j]! * b[j]!
    b[i] = sum / a[i * n + i]!
  }
  return b
}
