import { describe, expect, it } from 'vitest'
import { dropOutliers, madToDeviation, median, medianDeviation } from '../../../shared/calibration/outliers'
import { seededRandom } from '../../../shared/calibration/random'
import { drawSystem } from '../../support/simulator/system'
import { checkValues } from '../../support/check-values'

describe('median absolute deviation', () => {
  it('is scaled by 1/Φ⁻¹(3/4) and gives R\'s examples', () => {
    const { input, expected } = checkValues<{ R_examples: number[][] }, { constant_exact: number, R_mad: number[] }>('mad.constant')
    expect(madToDeviation).toBeCloseTo(expected.constant_exact, 12)
    // R rounds the constant to 1.4826.
    input.R_examples.forEach((values, i) => expect(medianDeviation(values) * 1.4826 / madToDeviation).toBeCloseTo(expected.R_mad[i]!, 12))
  })

  it('finds the outlier of a computed Hampel example', () => {
    const { input, expected } = checkValues<{ readings: number[], k: number }, { median: number, sigma: number, outliers_index: number[] }>('hampel.example')
    expect(median(input.readings)).toBe(expected.median)
    expect(medianDeviation(input.readings)).toBeCloseTo(expected.sigma, 12)
    const found = [...input.readings.keys()].filter(i => Math.abs(input.readings[i]! - expected.median) > input.k * medianDeviation(input.readings))
    expect(found).toEqual(expected.outliers_index)
  })

  it('takes the mean of the middle two of an even number, unsorted input left alone', () => {
    const values = [4, 1, 3, 2]
    expect(median(values)).toBe(2.5)
    expect(values).toEqual([4, 1, 3, 2])
  })
})

describe('spoiled patches', () => {
  const reading = (seed: number, levels: number, noise: number) => {
    const random = seededRandom(seed)
    const system = drawSystem(random)
    return Array.from({ length: levels }, (_, i) => ({ level: i / (levels - 1), lightness: system.lightness(i / (levels - 1)) + noise * random.normal() }))
  }

  it.each([21, 61])('are found among %i levels and sound ones kept', (count) => {
    let [found, lost] = [0, 0]
    for (let seed = 0; seed < 20; seed++) {
      const points = reading(seed, count, 0.3)
      const spoiled = 3 + (seed % (count - 6))
      points[spoiled]!.lightness += points[spoiled]!.lightness > 50 ? -18 : 18
      const used = dropOutliers(points)
      if (!used[spoiled]) found++
      lost += used.filter((u, i) => !u && i !== spoiled).length
    }
    expect(found).toBeGreaterThanOrEqual(18)
    expect(lost).toBeLessThanOrEqual(4)
  })

  it('are not seen in sound readings, noise-free ones included', () => {
    let dropped = 0
    for (let seed = 0; seed < 30; seed++) dropped += dropOutliers(reading(seed, 21, seed % 3 * 0.3)).filter(u => !u).length
    expect(dropped).toBeLessThanOrEqual(2)
  })
})
