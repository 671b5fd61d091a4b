import { describe, expect, it } from 'vitest'
import { bandsOf, simultaneousBands } from '../../../shared/calibration/bands'
import { expectedError } from '../../../shared/calibration/expected-error'
import { lightnessShift, spreadOfPrints } from '../../../shared/calibration/print-spread'
import { seededRandom } from '../../../shared/calibration/random'

const random = seededRandom(5)
const curve = Float64Array.from({ length: 200 }, (_, i) => 20 + i * 0.3)
/** Draws of one independent normal of deviation 1 at each position. */
const draws = Array.from({ length: 2000 }, () => curve.map(v => v + random.normal()))

describe('bands', () => {
  it('hold the normal quantile pointwise', () => {
    const { low, high } = bandsOf(curve, draws)
    // 1.96 by the normal distribution's table; half a per cent of it for the draws' own scatter, and the guard's.
    expect((high[100]! - low[100]!) / 2).toBeGreaterThan(1.85)
    expect((high[100]! - low[100]!) / 2).toBeLessThan(2.05)
  })

  it('of all positions hold the quantile of the greatest of many normals', () => {
    const { low, high } = simultaneousBands(curve, draws)
    // Of 200 independent normals: Φ⁻¹(1 − (1 − 0.95^(1/200))/2) = 3.66, by the normal distribution.
    expect((high[100]! - low[100]!) / 2).toBeGreaterThan(3.45)
    expect((high[100]! - low[100]!) / 2).toBeLessThan(3.9)
  })
})

describe('print-to-print spread', () => {
  const response = Float64Array.from({ length: 1025 }, (_, i) => 25 + 65 * i / 1024)
  it('moves lightness by the measured slope: a log exposure of δ is δ/2.5 of the ink', () => {
    expect(lightnessShift(response, 0.05, 0)[512]).toBeCloseTo(-65 * 0.05 / 2.5, 6)
    expect(lightnessShift(response, -0.05, 0)[512]).toBeCloseTo(65 * 0.05 / 2.5, 6)
    expect(lightnessShift(response, 0.05, 0, 1.25)[512]).toBeCloseTo(-65 * 0.05 / 1.25, 6)
  })

  it('is the assumption until three prints tell', () => {
    const print = (shift: number) => Array.from({ length: 100 }, (_, i) => ({ level: i / 99, lightness: 25 + 65 * Math.max(0, i / 99 - shift / 2.5), x: 0, y: 0, xMm: 0, yMm: 0 }))
    expect(spreadOfPrints([print(0.1), print(-0.1)], response)).toEqual({ spread: { exposure: 0.02, coating: 0.01 }, told: false })
    const { spread, told } = spreadOfPrints([print(0.1), print(0), print(-0.1)], response)
    expect(told).toBe(true)
    // √((2 · 0.02² + 2 · 0.1²)/4), by hand.
    expect(spread.exposure).toBeCloseTo(Math.sqrt((2 * 0.02 ** 2 + 0.02) / 4), 2)
  })

  it('goes into the next print by √(1 + 1/n), and one more wedge print buys what that rule says', () => {
    const exact = [response, response].map(v => v.slice())
    const many = Array.from({ length: 400 }, () => exact[0]!)
    const of = (prints: number) => expectedError(response, many, { prints })
    expect(of(1).curve.p95).toBe(0)
    expect(of(1).nextPrint.p95 / of(3).nextPrint.p95).toBeCloseTo(Math.sqrt(2) / Math.sqrt(4 / 3), 1)
    expect(of(1).nextPrintWithOneMore).toEqual(of(2).nextPrint)
  })
})
