import { ComputeError } from '../errors'

/**
 * Cholesky factor L of a symmetric positive definite matrix, A = L·Lᵀ (Golub and Van Loan, Matrix Computations, 4th ed.,
 * 4.2.5). `a` is n × n by rows; its lower triangle is read and overwritten with L, the upper is left alone.
 * @throws ComputeError `invalid_input` when the matrix is not positive definite.
 */
export function factorise(a: Float64Array, n: number): Float64Array {
  for (let j = 0; j < n; j++) {
    const rowJ = j * n
    let square = a[rowJ + j]!
    for (let k = rowJ; k < rowJ + j; k++) square -= a[k]! * a[k]!
    if (!(square > 0)) throw new ComputeError('invalid_input', 'The values leave the fit without a unique answer.')
    const pivot = Math.sqrt(square)
    a[rowJ + j] = pivot
    let i = j + 1
    for (; i + 3 < n; i += 4) fourBelow(a, n, i * n, rowJ, j, pivot)
    for (; i < n; i++) {
      let sum = a[i * n + j]!
      for (let k = 0; k < j; k++) sum -= a[i * n + k]! * a[rowJ + k]!
      a[i * n + j] = sum / pivot
    }
  }
  return a
}

/** Column j of four rows at once: each value of row j is fetched once for the four. */
function fourBelow(a: Float64Array, n: number, row: number, rowJ: number, j: number, pivot: number): void {
  const [second, third, fourth] = [row + n, row + 2 * n, row + 3 * n]
  let s1 = a[row + j]!
  let s2 = a[second + j]!
  let s3 = a[third + j]!
  let s4 = a[fourth + j]!
  for (let k = 0; k < j; k++) {
    const value = a[rowJ + k]!
    s1 -= a[row + k]! * value
    s2 -= a[second + k]! * value
    s3 -= a[third + k]! * value
    s4 -= a[fourth + k]! * value
  }
  a[row + j] = s1 / pivot
  a[second + j] = s2 / pivot
  a[third + j] = s3 / pivot
  a[fourth + j] = s4 / pivot
}

/** Solves L·X = B in place for all `columns` of B (n × columns, by rows), by forward substitution. */
export function solveLowerColumns(l: Float64Array, n: number, b: Float64Array, columns: number): Float64Array {
  for (let i = 0; i < n; i++) {
    const row = i * columns
    const ofL = i * n
    let k = 0
    for (; k + 3 < i; k += 4) takeFour(b, columns, row, k * columns, l[ofL + k]!, l[ofL + k + 1]!, l[ofL + k + 2]!, l[ofL + k + 3]!)
    for (; k < i; k++) takeFour(b, columns, row, k * columns, l[ofL + k]!, 0, 0, 0)
    const pivot = l[ofL + i]!
    for (let c = row; c < row + columns; c++) b[c]! /= pivot
  }
  return b
}

/** Takes multiples of four rows, from `first` on, off the row at `row`: fewer stores than one at a time. */
function takeFour(b: Float64Array, columns: number, row: number, first: number, f1: number, f2: number, f3: number, f4: number): void {
  const [second, third, fourth] = [f2 === 0 ? first : first + columns, f3 === 0 ? first : first + 2 * columns, f4 === 0 ? first : first + 3 * columns]
  for (let c = 0; c < columns; c++)
    b[row + c]! -= f1 * b[first + c]! + f2 * b[second + c]! + f3 * b[third + c]! + f4 * b[fourth + c]!
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
