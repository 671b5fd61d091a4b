import { describe, expect, it } from 'vitest'
import { minimise } from '../../../shared/calibration/nelder-mead'

describe('Nelder and Mead\'s simplex', () => {
  it('finds the least value of a tilted bowl', () => {
    const bowl = ([x, y, z]: readonly number[]): number => 100 * ((x! - 1) ** 2 + 2 * (y! + 2) ** 2 + 0.5 * (z! - 3) ** 2 + 0.5 * (x! - 1) * (y! + 2))
    minimise(bowl, [0, 0, 0], [1, 1, 1], 300).forEach((v, k) => expect(Math.abs(v - [1, -2, 3][k]!)).toBeLessThan(0.1))
  })

  it('keeps to its number of evaluations and never gets worse than the start', () => {
    for (const limit of [4, 9, 30]) {
      let [used, least] = [0, Number.POSITIVE_INFINITY]
      // Rosenbrock's valley
      const valley = ([x, y]: readonly number[]): number => {
        used++
        const value = 100 * (y! - x! ** 2) ** 2 + (1 - x!) ** 2
        least = Math.min(least, value)
        return value
      }
      const [x, y] = minimise(valley, [-1.2, 1], [0.5, 0.5], limit)
      expect(used).toBeLessThanOrEqual(limit + 1)
      expect(100 * (y! - x! ** 2) ** 2 + (1 - x!) ** 2).toBe(least)
    }
  })
})
