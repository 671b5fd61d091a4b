import { factorise, solveLower, solveUpper } from '#shared/calibration/cholesky'
import { responsePoints } from '#shared/tone/response'

/** Least-squares polynomial through steps, in Chebyshev polynomials of 2·level − 1, at 1025 levels. A baseline only. */
export function fitPolynomial(steps: readonly { level: number, lightness: number }[], degree: number): Float64Array {
  const terms = degree + 1
  const [gram, moments] = [new Float64Array(terms * terms), new Float64Array(terms)]
  for (const { level, lightness } of steps) {
    const row = chebyshev(level, degree)
    row.forEach((value, i) => {
      moments[i]! += value * lightness
      row.forEach((other, j) => { gram[i * terms + j]! += value * other })
    })
  }
  const factor = factorise(gram, terms)
  const coefficients = solveUpper(factor, terms, solveLower(factor, terms, moments))
  return Float64Array.from({ length: responsePoints }, (_, i) =>
    chebyshev(i / (responsePoints - 1), degree).reduce((sum, value, k) => sum + coefficients[k]! * value, 0))
}

const chebyshev = (level: number, degree: number): number[] =>
  Array.from({ length: degree + 1 }, (_, k) => Math.cos(k * Math.acos(Math.min(1, Math.max(-1, 2 * level - 1)))))
