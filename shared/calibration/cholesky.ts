import { ComputeError } from '../errors'

/**
 * Cholesky factor L of a symmetric positive definite matrix, A = L·Lᵀ (Golub and Van Loan, Matrix Computations, 4th ed.,
 * 4.2.5). `a` is n × n by rows; its lower triangle is read and overwritten with L, the upper is left alone.
 * @throws ComputeError `invalid_input` when the matrix is not positive definite.
 */
export function factorise(a: Float64Array, n: number): Float64Array {
  for (let j = 0; j < n; j++) {
    const rowJ = j * n
    for (let i = j; i < n; i++) {
      const rowI = i * n
      let sum = a[rowI + j]!
      for (let k = 0; k < j; k++) sum -= a[rowI + k]! * a[rowJ + k]!
      if (i > j) a[rowI + j] = sum / a[rowJ + j]!
      else if (sum > 0) a[rowI + j] = Math.sqrt(sum)
      else throw new ComputeError('invalid_input', 'The values leave the fit without a unique answer.')
    }
  }
  return a
}

/** Solves L·x = b in place, by forward substitution. */
export function solveLower(l: Float64Array, n: number, b: Float64Array): Float64Array {
  for (let i = 0; i < n; i++) {
    let sum = b[i]!
    for (let k = 0, row = i * n; k < i; k++) sum -= l[row + k]! * b[k]!
    b[i] = sum / l[i * n + i]!
  }
  return b
}

/** Solves Lᵀ·x = b in place, by back substitution. */
export function solveUpper(l: Float64Array, n: number, b: Float64Array): Float64Array {
  for (let i = n - 1; i >= 0; i--) {
    let sum = b[i]!
    for (let k = i + 1; k < n; k++) sum -= l[k * n + i]! * b[k]!
    b[i] = sum / l[i * n + i]!
  }
  return b
}

/** ln |A| of the matrix whose factor is L. */
export function logDeterminant(l: Float64Array, n: number): number {
  let sum = 0
  for (let i = 0; i < n; i++) sum += Math.log(l[i * n + i]!)
  return 2 * sum
}
