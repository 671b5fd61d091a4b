import { describe, expect, it } from 'vitest'
import { combine, cubicBasis, differencePenalty } from '../../../shared/calibration/bspline'
import { factorise, logDeterminant, solveLower, solveUpper } from '../../../shared/calibration/cholesky'
import { firstFit, fitSmooth, levelGrid, splineCount, warpedAxes } from '../../../shared/calibration/smooth-fit'
import { weighCandidates } from '../../../shared/calibration/spline-average'
import { normalEquations, penalisedFit, splineCandidates } from '../../../shared/calibration/spline-candidates'
import { seededRandom } from '../../../shared/calibration/random'
import { valueAt } from '../../../shared/tone/response'
import reference from '../../fixtures/spline-average.json'
import { checkValues, greatestDifference } from '../../support/check-values'

describe('B-splines', () => {
  it('add up to 1 everywhere and carry straight lines', () => {
    const x = Float64Array.from({ length: 101 }, (_, i) => i / 100)
    const basis = cubicBasis(x, 12)
    expect(greatestDifference(combine(basis, new Float64Array(12).fill(1)), x.map(() => 1))).toBeLessThan(1e-14)
    // Greville abscissae: knots are 1/9 apart and function k is centred on (k − 1)/9.
    expect(greatestDifference(combine(basis, Float64Array.from({ length: 12 }, (_, k) => (k - 1) / 9)), x)).toBeLessThan(1e-14)
  })

  it('penalise what a difference order sees, and nothing below', () => {
    const penalty = differencePenalty(10, 3)
    for (const power of [0, 1, 2]) {
      const a = Float64Array.from({ length: 10 }, (_, k) => k ** power)
      expect(combine(penalty, a).every(v => Math.abs(v) < 1e-9)).toBe(true)
    }
    // Third differences of k³ are 6: seven of them, squared.
    const cubes = Float64Array.from({ length: 10 }, (_, k) => k ** 3)
    expect(combine(penalty, cubes).reduce((sum, v, k) => sum + v * cubes[k]!, 0)).toBeCloseTo(7 * 36, 6)
  })

  it('with penalty give the P-splines of Eilers and Marx as SciPy computes them', () => {
    interface Input { x: number[], y: number[], segments: number, penalty_order: number }
    const { input, expected, tolerance } = checkValues<Input, { fit: Record<string, number[]> }>('pspline.eilers_marx')
    const count = input.segments + 3
    const basis = cubicBasis(input.x, count)
    for (const [smoothing, fit] of Object.entries(expected.fit)) {
      const { coefficients } = penalisedFit(normalEquations(basis, Float64Array.from(input.y), count), { matrix: differencePenalty(count, input.penalty_order), splines: count, order: input.penalty_order }, Number(smoothing))
      expect(greatestDifference(combine(basis, coefficients), fit), `λ ${smoothing}`).toBeLessThanOrEqual(tolerance)
    }
  })
})

describe('Cholesky', () => {
  it('solves and gives the determinant', () => {
    const a = Float64Array.of(4, 2, 0.6, 2, 5, 1.2, 0.6, 1.2, 3)
    const l = factorise(a.slice(), 3)
    expect(greatestDifference(combine(a, solveUpper(l, 3, solveLower(l, 3, Float64Array.of(1, 2, 3)))), [1, 2, 3])).toBeLessThan(1e-14)
    // By hand: 4(15 − 1.44) − 2(6 − 0.72) + 0.6(2.4 − 3) = 43.32.
    expect(Math.exp(logDeterminant(l, 3))).toBeCloseTo(43.32, 10)
  })

  it('refuses a matrix that is not positive definite', () => {
    expect(() => factorise(Float64Array.of(1, 2, 2, 1), 2)).toThrowError(expect.objectContaining({ code: 'invalid_input' }))
  })
})

describe('averaged splines', () => {
  const points = reference.levels.map((level, i) => ({ level, lightness: reference.lightnesses[i]! }))
  const every = (curve: ArrayLike<number>): number[] => Array.from({ length: 17 }, (_, i) => curve[i * reference.every]!)

  it('start from the numpy implementation\'s first fit', () => {
    const [best] = splineCandidates([cubicBasis(reference.levels, splineCount)], Float64Array.from(reference.lightnesses)).sort((a, b) => a.criterion - b.criterion)
    expect(best!.smoothing).toBeCloseTo(reference.firstFit.smoothing, 9)
    expect(best!.criterion).toBeCloseTo(reference.firstFit.criterion, 6)
    expect(best!.variance).toBeCloseTo(reference.firstFit.variance, 8)
    expect(greatestDifference(every(firstFit(points)), reference.firstFit.curve)).toBeLessThan(1e-6)
  })

  it('weigh the candidates as it does', () => {
    const bases = warpedAxes(firstFit(points)).map(axis => cubicBasis(points.map(p => valueAt(axis, p.level)), splineCount))
    const weights = Object.fromEntries(weighCandidates(splineCandidates(bases, Float64Array.from(reference.lightnesses)))
      .map(({ candidate, weight }) => [`${candidate.basis}|${Math.log10(candidate.smoothing).toFixed(1)}`, weight]))
    const expected: Record<string, number> = reference.average.weights
    expect(Object.keys(weights).sort()).toEqual(Object.keys(expected).sort())
    for (const [key, weight] of Object.entries(expected)) expect(weights[key]).toBeCloseTo(weight, 4)
  })

  it('end in its curve and, by draws, in its standard deviation', () => {
    const { curve, draws } = fitSmooth(points, 1500)
    expect(greatestDifference(every(curve), reference.average.curve)).toBeLessThan(1e-4)
    // 1.5 · the t ratio of 34 degrees of freedom (2.0322/1.9600, Student's table)
    const widening = 1.5 * 2.0322 / 1.96
    every(levelGrid).forEach((_, i) => {
      const at = draws.map(draw => draw[i * reference.every]!)
      const mean = at.reduce((a, b) => a + b, 0) / at.length
      const deviation = Math.sqrt(at.reduce((sum, v) => sum + (v - mean) ** 2, 0) / at.length)
      // The spread between candidates is not widened, so the ratio may fall a little short.
      expect(deviation / reference.average.deviation[i]!).toBeGreaterThan(widening * 0.8)
      expect(deviation / reference.average.deviation[i]!).toBeLessThan(widening * 1.1)
    })
  })
})

describe('seeded random numbers', () => {
  it('come again from the same seed, differ between seeds, and are spread as they should', () => {
    const take = (seed: number): number[] => { const r = seededRandom(seed); return Array.from({ length: 20_000 }, () => r.uniform()) }
    expect(take(5)).toEqual(take(5))
    expect(take(5).slice(0, 4)).not.toEqual(take(6).slice(0, 4))
    const uniforms = take(9)
    expect(uniforms.every(u => u >= 0 && u < 1)).toBe(true)
    expect(uniforms.reduce((a, b) => a + b, 0) / 20_000).toBeCloseTo(0.5, 1.9)
    const random = seededRandom(3)
    const normals = Array.from({ length: 20_000 }, () => random.normal())
    const within = (k: number): number => normals.filter(z => Math.abs(z) < k).length / 20_000
    // Φ: 68.27 %, 95.45 %
    expect(Math.abs(within(1) - 0.6827)).toBeLessThan(0.012)
    expect(Math.abs(within(2) - 0.9545)).toBeLessThan(0.006)
  })
})
