/**
 * Cubic B-splines of `count` functions on equally spaced knots over 0 … 1 (Eilers and Marx, Statistical Science
 * 11(2):89–121, 1996): one row a position, `count` columns, by rows. Positions are clamped to 0 … 1.
 */
export function cubicBasis(positions: ArrayLike<number>, count: number): Float64Array {
  const segments = count - 3
  const basis = new Float64Array(positions.length * count)
  for (let row = 0; row < positions.length; row++) {
    const place = Math.min(1, Math.max(0, positions[row]!)) * segments
    const segment = Math.min(segments - 1, Math.floor(place))
    const u = place - segment
    const at = row * count + segment
    basis[at] = (1 - u) ** 3 / 6
    basis[at + 1] = (3 * u ** 3 - 6 * u ** 2 + 4) / 6
    basis[at + 2] = (-3 * u ** 3 + 3 * u ** 2 + 3 * u + 1) / 6
    basis[at + 3] = u ** 3 / 6
  }
  return basis
}

/** DᵀD of the differences of an order, `count` × `count`: the penalty of a P-spline (Eilers and Marx 1996, eq. 7). */
export function differencePenalty(count: number, order: number): Float64Array {
  let row = [1]
  for (let i = 0; i < order; i++) row = [...row, 0].map((value, k) => value - (row[k - 1] ?? 0))
  const penalty = new Float64Array(count * count)
  for (let start = 0; start + order < count; start++)
    for (let i = 0; i <= order; i++)
      for (let j = 0; j <= order; j++) penalty[(start + i) * count + start + j]! += row[i]! * row[j]!
  return penalty
}

/** The matrix (by rows, `coefficients.length` columns) times the coefficients. */
export function combine(matrix: Float64Array, coefficients: Float64Array): Float64Array {
  const columns = coefficients.length
  const values = new Float64Array(matrix.length / columns)
  for (let row = 0; row < values.length; row++) {
    let sum = 0
    for (let k = 0, at = row * columns; k < columns; k++) sum += matrix[at + k]! * coefficients[k]!
    values[row] = sum
  }
  return values
}
