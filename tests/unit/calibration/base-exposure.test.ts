import { describe, expect, it } from 'vitest'
import { findBaseExposure } from '../../../shared/calibration/base-exposure'
import { exposureCurves } from '../../../shared/calibration/exposure-curves'
import { leastSquares } from '../../../shared/calibration/levenberg-marquardt'
import { seededRandom } from '../../../shared/calibration/random'
import { densityFromLightness, lightnessFromDensity } from '../../../shared/tone/density'
import independent from '../../fixtures/base-exposure.json'
import { printExposureStrip, simulatedBaseSeconds, trueBaseLog } from '../../support/simulator/exposure-strip'
import { drawSystem } from '../../support/simulator/system'

const halfStop = Math.log10(2) / 2
const even = { gradient: 0, mottle: 0, texture: 0, fallOff: 0 }
const refusal = (code: string, part = '') => expect.objectContaining({ code, message: expect.stringContaining(part) })
/** A print of logistic response: density 0.08 … 1.4, half of it at 60 s, odds by e^5 a decade. */
const logistic = (seconds: number): number => lightnessFromDensity(0.08 + 1.32 / (1 + Math.exp(-5 * Math.log10(seconds / 60))))
const strip = (first: number, steps: number) => Array.from({ length: steps }, (_, i) => first * 2 ** (i / 2)).map(exposureSeconds => ({ exposureSeconds, lightness: logistic(exposureSeconds) }))
const codes = (warnings: { code: string }[]): string[] => warnings.map(w => w.code)

describe('the base exposure of a strip', () => {
  it.each(independent.strips)('is that of an independent numpy and scipy program, strip %#', ({ values, meanLog, lowLog, highLog }) => {
    const found = findBaseExposure(values)
    // Both are drawn: within 0.03 log, a tenth of a stop; the bounds, told by few draws and widened by 1.3, within 0.1 log.
    expect(Math.abs(Math.log10(found.exposureSeconds) - meanLog)).toBeLessThan(0.03)
    expect(Math.abs(Math.log10(found.exposureSecondsLow) - meanLog - 1.3 * (lowLog - meanLog))).toBeLessThan(0.1)
    expect(Math.abs(Math.log10(found.exposureSecondsHigh!) - meanLog - 1.3 * (highLog - meanLog))).toBeLessThan(0.1)
  })

  it('comes with the strip’s line, falling, through the print it was made from', () => {
    const { line } = findBaseExposure(strip(8, 12))
    expect([line[0]!.exposureSeconds, line.at(-1)!.exposureSeconds]).toEqual([expect.closeTo(8, 6), expect.closeTo(8 * 2 ** 5.5, 6)])
    for (const [i, { exposureSeconds, lightness }] of line.entries()) {
      expect(Math.abs(lightness - logistic(exposureSeconds)), `${exposureSeconds} s`).toBeLessThan(1.5)
      if (i > 0) expect(lightness).toBeLessThanOrEqual(line[i - 1]!.lightness)
    }
  })

  it('is the shortest time within 1 L* of the black (derived from a logistic print)', () => {
    const black = lightnessFromDensity(1.4)
    const wanted = densityFromLightness(black + 1)
    const share = (wanted - 0.08) / 1.32
    const truth = 60 * 10 ** (Math.log(share / (1 - share)) / 5)
    const { exposureSeconds, exposureSecondsLow, exposureSecondsHigh, blackLightness, warnings } = findBaseExposure(strip(truth / 16, 12))
    expect(Math.abs(Math.log2(exposureSeconds / truth))).toBeLessThan(0.15)
    expect(exposureSecondsLow).toBeLessThan(truth)
    expect(exposureSecondsHigh!).toBeGreaterThan(truth)
    expect(Math.abs(blackLightness - black)).toBeLessThan(0.5)
    expect(warnings).toEqual([])
  })

  it('lies within a third of a stop on evenly printed systems of every shape', () => {
    const errors = Array.from({ length: 24 }, (_, seed) => {
      const random = seededRandom(seed)
      const system = drawSystem(random, { exposureScaleFrom: 1, exposureScaleTo: 2 })
      const truth = trueBaseLog(system)
      const values = printExposureStrip(system, { steps: 10, stepLog: halfStop, firstLog: truth - 6 * halfStop }, even, random)
      return Math.abs(Math.log2(findBaseExposure(values).exposureSeconds / simulatedBaseSeconds / 10 ** truth))
    })
    expect(errors.sort((a, b) => a - b)[Math.floor(0.9 * 24)]).toBeLessThan(0.33)
  })

  it('does not depend on the order of values; repeats narrow nothing but the noise', () => {
    const values = strip(20, 10)
    expect(findBaseExposure([...values].reverse())).toEqual(findBaseExposure(values))
    const twice = findBaseExposure([...values, ...values])
    expect(Math.log10(twice.exposureSecondsHigh! / twice.exposureSecondsLow)).toBeLessThan(Math.log10(findBaseExposure(values).exposureSecondsHigh! / findBaseExposure(values).exposureSecondsLow))
  })

  it('scales with the times', () => {
    const [once, tenfold] = [findBaseExposure(strip(20, 10)), findBaseExposure(strip(20, 10).map(v => ({ ...v, exposureSeconds: 10 * v.exposureSeconds })))]
    expect(tenfold.exposureSeconds / once.exposureSeconds).toBeCloseTo(10, 3)
  })

  it('of gum is shorter: nine tenths of the layer stay', () => {
    const gum = findBaseExposure(strip(10, 12), { kind: 'layer-survives' })
    // logit(0.9)/5 decades above the half, derived
    expect(Math.abs(Math.log2(gum.exposureSeconds / (60 * 10 ** (Math.log(9) / 5))))).toBeLessThan(0.25)
    expect(gum.exposureSeconds).toBeLessThan(findBaseExposure(strip(10, 12)).exposureSeconds)
  })

  it('of a printing-out print reaches a chosen density', () => {
    const found = findBaseExposure(strip(10, 10), { kind: 'chosen-density', density: 1.1 })
    const share = (1.1 - 0.08) / 1.32
    expect(Math.abs(Math.log2(found.exposureSeconds / (60 * 10 ** (Math.log(share / (1 - share)) / 5))))).toBeLessThan(0.1)
    expect(() => findBaseExposure(strip(10, 14), { kind: 'chosen-density', density: 2 })).toThrowError(refusal('range_too_small', 'never gets as dark'))
  })

  it('is called a guess where the strip is too short at either end', () => {
    expect(codes(findBaseExposure(strip(8, 7)).warnings)).toEqual(['strip_ends_too_soon'])
    expect(codes(findBaseExposure(strip(60, 8), { kind: 'chosen-density', density: 0.5 }).warnings)).toEqual(['strip_starts_too_late'])
    expect(() => findBaseExposure(strip(600, 8))).toThrowError(refusal('range_too_small', 'four stops lower'))
    expect(() => findBaseExposure(strip(0.5, 8))).toThrowError(refusal('range_too_small', 'four stops further'))
  })

  it('is refused for what is no strip', () => {
    expect(() => findBaseExposure(strip(20, 4))).toThrowError(refusal('too_few_levels', 'these are 4'))
    expect(() => findBaseExposure([...strip(20, 4), ...strip(20, 4)])).toThrowError(refusal('too_few_levels'))
    expect(() => findBaseExposure(strip(20, 8).map(v => ({ ...v, lightness: 40 })))).toThrowError(refusal('range_too_small'))
    expect(() => findBaseExposure(strip(20, 8).map((v, i, all) => ({ ...v, lightness: all[7 - i]!.lightness })))).toThrowError(refusal('levels_unrelated'))
    expect(() => findBaseExposure([...strip(20, 8), { exposureSeconds: 0, lightness: 50 }])).toThrowError(refusal('invalid_input', 'Value 9'))
    expect(() => findBaseExposure([...strip(20, 8), { exposureSeconds: 9, lightness: Number.NaN }])).toThrowError(refusal('invalid_input', 'Value 9'))
  })
})

describe('the curves of exposure', () => {
  it.each(Object.entries(exposureCurves))('%s rise from 0 to 1; slope and position fit the share', (_, { share, slope, position }) => {
    for (const shape of [0.01, 0.3, 1, 4]) {
      for (let z = -6; z <= 6; z += 0.5) {
        expect(slope(z, shape)).toBeCloseTo((share(z + 1e-5, shape) - share(z - 1e-5, shape)) / 2e-5, 6)
        const s = share(z, shape)
        if (s > 1e-9 && s < 1 - 1e-9) expect(position(s, shape)).toBeCloseTo(z, 5)
      }
      expect(share(-1e4, shape)).toBeCloseTo(0, 6)
      expect(share(1e4, shape)).toBeCloseTo(1, 6)
    }
  })
  it('are the logistic curve at shape 1, both; the turned one tends to 1 − e^(−H)', () => {
    expect(exposureCurves.richards.share(0.7, 1)).toBeCloseTo(1 / (1 + Math.exp(-0.7)), 12)
    expect(exposureCurves.turned.share(0.7, 1)).toBeCloseTo(1 / (1 + Math.exp(-0.7)), 12)
    expect(exposureCurves.turned.share(0.4, 1e-7)).toBeCloseTo(1 - Math.exp(-Math.exp(0.4)), 6)
  })
})

describe('least squares', () => {
  it('finds the minimum of Rosenbrock’s valley at (1, 1) (Computer Journal 3(3):175–184, 1960)', () => {
    const { at, halfSquares } = leastSquares(([x, y]) => Float64Array.of(10 * (y! - x! * x!), 1 - x!), [-1.2, 1])
    expect(at[0]).toBeCloseTo(1, 5)
    expect(at[1]).toBeCloseTo(1, 5)
    expect(halfSquares).toBeLessThan(1e-10)
  })
})
