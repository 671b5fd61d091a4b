import { describe, expect, it } from 'vitest'
import { isotonic } from '../../../shared/calibration/isotonic'
import { pchip, pchipSlopes } from '../../../shared/calibration/pchip'
import { seededRandom } from '../../../shared/calibration/random'
import { checkValues, greatestDifference } from '../../support/check-values'

interface Points { x: number[], y: number[], xq: number[] }

describe('PCHIP (Fritsch–Butland slopes, three-point ends)', () => {
  it('gives SciPy\'s values and slopes on the RPN 14 data', () => {
    const { input, expected, tolerance } = checkValues<Points, { yq: number[], slopes_at_knots: number[] }>('pchip.rpn14')
    expect(greatestDifference(input.xq.map(pchip(input.x, input.y)), expected.yq)).toBeLessThanOrEqual(tolerance)
    expect(greatestDifference(pchipSlopes(input.x, input.y), expected.slopes_at_knots)).toBeLessThanOrEqual(tolerance)
  })

  it('gives the NAG library\'s published results', () => {
    const { input, expected, tolerance } = checkValues<Points, { yq_4dp: number[], scipy_full: number[] }>('pchip.nag_e01be')
    const values = input.xq.map(pchip(input.x, input.y))
    expect(greatestDifference(values, expected.yq_4dp)).toBeLessThanOrEqual(tolerance)
    expect(greatestDifference(values, expected.scipy_full)).toBeLessThan(1e-12)
  })

  it('gives SciPy\'s values on Akima\'s data, level where the data are', () => {
    const { input, expected, tolerance } = checkValues<Points, { pchip_yq: number[], pchip_slopes: number[] }>('pchip.akima')
    const interpolant = pchip(input.x, input.y)
    expect(greatestDifference(input.xq.map(interpolant), expected.pchip_yq)).toBeLessThanOrEqual(tolerance)
    expect(greatestDifference(pchipSlopes(input.x, input.y), expected.pchip_slopes)).toBeLessThanOrEqual(tolerance)
    for (let x = 0; x <= 8; x += 0.05) expect(interpolant(x)).toBe(10)
  })

  it('does not overshoot where an ordinary cubic spline does', () => {
    const { input, expected } = checkValues<Points, { max_on_12011_grid: number, min_on_grid: number }>('spline.rpn14.notaknot')
    expect(expected.max_on_12011_grid).toBeGreaterThan(1)
    expect(expected.min_on_grid).toBeLessThan(0)
    const interpolant = pchip(input.x, input.y)
    const values = Array.from({ length: 12_011 }, (_, i) => interpolant(7.99 + i / 1000))
    expect(Math.max(...values)).toBeLessThanOrEqual(1)
    expect(Math.min(...values)).toBeGreaterThanOrEqual(0)
  })

  it('never falls where the data do not, and meets every point', () => {
    for (let seed = 0; seed < 40; seed++) {
      const random = seededRandom(seed)
      const x = Array.from({ length: 3 + random.below(12) }, (_, i) => i + 0.9 * random.uniform())
      const y = [...isotonic(x.map(() => 100 * random.uniform()))]
      const interpolant = pchip(x, y)
      expect(greatestDifference(x.map(interpolant), y)).toBe(0)
      let before = interpolant(x[0]! - 1)
      expect(before).toBe(y[0])
      for (let i = 0; i <= 2000; i++) {
        const value = interpolant(x[0]! + (x.at(-1)! - x[0]!) * i / 2000)
        if (!(value >= before - 1e-12)) expect.fail(`falls, seed ${seed}`)
        before = value
      }
    }
  })

  it('refuses points without rising, finite positions', () => {
    for (const [x, y] of [[[1], [1]], [[1, 1], [1, 2]], [[2, 1], [1, 2]], [[1, 2], [1, Number.NaN]], [[1, 2], [1]]] as const)
      expect(() => pchip(x, y)).toThrowError(expect.objectContaining({ code: 'invalid_input' }))
  })
})
