import { describe, expect, it } from 'vitest'
import { isotonic } from '../../../shared/calibration/isotonic'
import { seededRandom } from '../../../shared/calibration/random'
import { checkValues, greatestDifference } from '../../support/check-values'

describe('isotonic regression', () => {
  it('gives the published example of Robert and Casella', () => {
    const { input, expected, tolerance } = checkValues<{ y: number[] }, { fit: number[] }>('isoreg.robert_casella')
    expect(greatestDifference(isotonic(input.y), expected.fit)).toBeLessThanOrEqual(tolerance)
  })

  it.each(['ir', 'ir3', 'ir4'])('gives R\'s answer to its manual\'s example %s', (name) => {
    const { input, expected, tolerance } = checkValues<Record<string, number[]>, Record<string, number[]>>('isoreg.R_manual')
    expect(greatestDifference(isotonic(input[name]!), expected[name]!)).toBeLessThanOrEqual(tolerance)
  })

  it.each(['a', 'b'])('passes scikit-learn\'s own test %s', (name) => {
    const { input, expected, tolerance } = checkValues<Record<string, number[]>, Record<string, number[]>>('isoreg.sklearn_tests')
    expect(greatestDifference(isotonic(input[name]!), expected[name]!)).toBeLessThanOrEqual(tolerance)
  })

  it('weighs', () => {
    const { input, expected, tolerance } = checkValues<{ y: number[], w: number[] }, { fit: number[] }>('isoreg.weighted')
    expect(greatestDifference(isotonic(input.y, input.w), expected.fit)).toBeLessThanOrEqual(tolerance)
  })

  it('never falls, keeps the mean, keeps what already rises, and leaves its input alone', () => {
    for (let seed = 0; seed < 50; seed++) {
      const random = seededRandom(seed)
      const values = Float64Array.from({ length: 1 + random.below(60) }, () => random.normal())
      const before = values.slice()
      const fit = isotonic(values)
      expect(values).toEqual(before)
      for (let i = 1; i < fit.length; i++) expect(fit[i]).toBeGreaterThanOrEqual(fit[i - 1]!)
      expect(fit.reduce((a, b) => a + b, 0)).toBeCloseTo(values.reduce((a, b) => a + b, 0), 10)
      expect(isotonic(fit)).toEqual(fit)
    }
    expect(isotonic([])).toHaveLength(0)
  })

  it('refuses values that are no numbers and weights that are not positive', () => {
    expect(() => isotonic([1, Number.NaN])).toThrowError(expect.objectContaining({ code: 'invalid_input' }))
    expect(() => isotonic([1, 2], [1, 0])).toThrowError(expect.objectContaining({ code: 'invalid_input' }))
  })
})
