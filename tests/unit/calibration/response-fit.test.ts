import { describe, expect, it } from 'vitest'
import { curvePoints } from '../../../shared/calibration/curve'
import { seededRandom } from '../../../shared/calibration/random'
import { fitResponse } from '../../../shared/calibration/response-fit'
import { aims } from '../../../shared/schemas/curves'
import { printLightnessForTone } from '../../../shared/tone/aims'
import { valueAt } from '../../../shared/tone/response'
import { drawSystem } from '../../support/simulator/system'

const grid = Array.from({ length: 1025 }, (_, i) => i / 1024)

function simulated(seed: number, count: number, noise: number) {
  const random = seededRandom(seed)
  const system = drawSystem(random)
  const points = Array.from({ length: count }, (_, i) => ({ level: i / (count - 1), lightness: system.lightness(i / (count - 1)) + noise * random.normal() }))
  return { points, truth: grid.map(level => system.lightness(level)) }
}

const greatestError = (fit: ArrayLike<number>, truth: readonly number[]): number => Math.max(...truth.map((v, i) => Math.abs(v - fit[i]!)))
const straightLines = (points: readonly { lightness: number }[]): number[] => grid.map(level => valueAt(points.map(p => p.lightness), level))
const middle = (values: number[]): number => values.sort((a, b) => a - b)[values.length >> 1]!

describe('a fitted response', () => {
  it.each([5, 7, 21, 60])('of %i levels never falls, stays within its band and within 0 … 100', (count) => {
    for (let seed = 0; seed < 6; seed++) {
      const { response, low, high, blackLightness, whiteLightness, used, expectedError } = fitResponse(simulated(seed, count, 1.5).points)
      expect(response).toHaveLength(1025)
      for (let i = 0; i < 1025; i++) {
        const sound = low[i]! <= response[i]! && response[i]! <= high[i]! && low[i]! >= 0 && high[i]! <= 100
          && (i === 0 || (response[i]! >= response[i - 1]! && low[i]! >= low[i - 1]! && high[i]! >= high[i - 1]!))
        if (!sound) expect.fail(`seed ${seed}, value ${i}`)
      }
      expect([blackLightness, whiteLightness]).toEqual([response[0], response[1024]])
      expect(used).toHaveLength(count)
      expect(expectedError.curve.median).toBeLessThanOrEqual(expectedError.curve.p95)
      expect(expectedError.nextPrint.median).toBeGreaterThan(0.9 * expectedError.curve.median)
    }
  })

  it('does not depend on the order of points, to the last bit, and leaves them alone', () => {
    const { points } = simulated(3, 31, 0.8)
    const doubled = [...points, ...points.map(p => ({ ...p, lightness: p.lightness + 0.3 }))]
    const random = seededRandom(1)
    const shuffled = [...doubled].map(p => ({ p, key: random.uniform() })).sort((a, b) => a.key - b.key).map(({ p }) => Object.freeze(p))
    const [one, other] = [fitResponse(doubled), fitResponse(Object.freeze(shuffled) as typeof shuffled)]
    expect(other.response).toEqual(one.response)
    expect(other.low).toEqual(one.low)
    expect(other.expectedError).toEqual(one.expectedError)
  })

  it('of 21 levels comes nearer to the truth than straight lines between them', () => {
    const errors = Array.from({ length: 24 }, (_, seed) => {
      const { points, truth } = simulated(100 + seed, 21, 0.5)
      return [greatestError(fitResponse(points).response, truth), greatestError(straightLines(points), truth)] as const
    })
    expect(middle(errors.map(e => e[0]))).toBeLessThan(0.85 * middle(errors.map(e => e[1])))
  })

  it('covers the truth by its 95 % band, and says how far off it may be', () => {
    let [inside, all, held] = [0, 0, 0]
    const systems = 40
    for (let seed = 0; seed < systems; seed++) {
      const { points, truth } = simulated(300 + seed, 31, 0.6)
      const { response, low, high, expectedError } = fitResponse(points)
      truth.forEach((value, i) => { if (value >= low[i]! && value <= high[i]!) inside++ })
      all += truth.length
      if (greatestError(response, truth) <= expectedError.curve.p95) held++
    }
    expect(inside / all).toBeGreaterThan(0.91)
    expect(inside / all).toBeLessThan(0.995)
    expect(held / systems).toBeGreaterThan(0.8)
  })

  it('leaves spoiled patches out and says so', () => {
    const { points, truth } = simulated(5, 41, 0.3)
    points[20]!.lightness -= 25
    const { used, warnings, response } = fitResponse(points)
    expect(used[20]).toBe(false)
    expect(warnings.map(w => w.code)).toContain('patches_dropped')
    expect(greatestError(response, truth)).toBeLessThan(2)
  })

  it('holds the last measured value outside the measured levels', () => {
    const { points } = simulated(8, 41, 0.2)
    const { response } = fitResponse(points.filter(p => p.level >= 0.1 && p.level <= 0.9))
    expect(response[0]).toBe(response[102])
    expect(response[1024]).toBe(response[922])
  })

  it('shrinks the next print\'s error with the wedge prints it rests on, to a floor', () => {
    const { points } = simulated(12, 31, 0.4)
    const [one, three, many] = [1, 3, 1000].map(prints => fitResponse(points, { prints }).expectedError.nextPrint.p95) as [number, number, number]
    expect(one).toBeGreaterThan(three)
    expect(three).toBeGreaterThan(many)
    expect(many).toBeGreaterThan(one / Math.SQRT2 * 0.9)
  })

  it('says that few levels tell little', () => {
    const { method, warnings } = fitResponse(simulated(2, 5, 0).points)
    expect(method).toBe('isotonic')
    expect(warnings.map(w => w.code)).toEqual(['few_levels'])
  })

  it('is refused without levels, numbers or a range', () => {
    const { points } = simulated(2, 9, 0)
    expect(() => fitResponse(points.slice(0, 4))).toThrowError(expect.objectContaining({ code: 'too_few_levels' }))
    expect(() => fitResponse(points.map(p => ({ ...p, lightness: Number.NaN })))).toThrowError(expect.objectContaining({ code: 'invalid_input' }))
    expect(() => fitResponse(points.map(p => ({ ...p, level: 2 * p.level })))).toThrowError(expect.objectContaining({ code: 'invalid_input' }))
    expect(() => fitResponse(points.map(p => ({ level: p.level, lightness: 50 })))).toThrowError(expect.objectContaining({ code: 'range_too_small' }))
    expect(() => fitResponse(points.slice(0, 5).map(p => ({ level: p.level, lightness: 50 })))).toThrowError(expect.objectContaining({ code: 'range_too_small' }))
  })
})

describe('curve points', () => {
  const { points, truth } = simulated(21, 31, 0.5)
  const { response, low, high } = fitResponse(points)

  it.each(aims)('for %s run from clear film to full ink within their band', (aim) => {
    const curve = curvePoints(response, low, high, aim)
    expect(curve).toHaveLength(1025)
    expect(curve[0]).toMatchObject({ tone: 0, level: 0 })
    expect(curve[1024]).toMatchObject({ tone: 1, level: 1 })
    curve.forEach(({ tone, level, levelLow, levelHigh }, i) => {
      const sound = tone === i / 1024 && levelLow <= level && level <= levelHigh && levelLow >= 0 && levelHigh <= 1 && (i === 0 || level >= curve[i - 1]!.level)
      if (!sound) expect.fail(`point ${i}`)
    })
  })

  it('print the aim on the fitted response, and nearly so on the true one', () => {
    const curve = curvePoints(response, low, high, 'keep-middle-tones')
    for (const { tone, level } of curve) {
      const wanted = printLightnessForTone(tone, 'keep-middle-tones', response[0]!, response[1024]!)
      if (!(Math.abs(valueAt(response, level) - wanted) < 1e-9)) expect.fail(`tone ${tone}`)
      if (!(Math.abs(valueAt(truth, level) - wanted) < 2.5)) expect.fail(`tone ${tone} on the true response`)
    }
  })

  it('without a band have none', () => {
    for (const { level, levelLow, levelHigh } of curvePoints(response, null, null, 'even-lightness')) expect([levelLow, levelHigh]).toEqual([level, level])
  })
})
