import { describe, expect, it } from 'vitest'
import { smoothFields, withMottle } from '../../../shared/calibration/covariance'
import { flatFieldFit } from '../../../shared/calibration/flat-field-fit'
import { seededRandom } from '../../../shared/calibration/random'
import { toneWeights } from '../../../shared/calibration/tone-weights'
import { fitSoundPrints, fitWedge } from '../../../shared/calibration/wedge-fit'
import { layoutWedge } from '../../../shared/calibration/wedge-layout'
import { wedgeModel } from '../../../shared/calibration/wedge-model'
import { withSuspectsHeard } from '../../../shared/calibration/wedge-suspects'
import type { WedgePatch } from '../../../shared/calibration/wedge-print'
import { curveLevels } from '../../../shared/tone/levels'
import reference from '../../fixtures/wedge-fit.json'
import { greatestDifference } from '../../support/check-values'
import { printQualities, rampErrors } from '../../support/simulator/print'
import { drawSystem } from '../../support/simulator/system'
import { printWedge } from '../../support/simulator/wedge'

const every = (curve: ArrayLike<number>): number[] => Array.from({ length: 17 }, (_, i) => curve[i * reference.every]!)
const referencePrint = reference.patches.map(([level, x, y, lightness]): WedgePatch =>
  ({ level: level!, x: x!, y: y!, lightness: lightness!, xMm: x! * reference.widthMm / 2, yMm: y! * reference.heightMm / 2 }))

function simulated(seed: number, quality = printQualities.typical, grid: '24x16' | '16x12' = '16x12') {
  const random = seededRandom(seed)
  const system = drawSystem(random)
  return { system, random, print: printWedge(system, layoutWedge({ grid, seed }), quality, random) }
}

describe('the wedge fit, step by step against numpy', () => {
  const { response: first } = flatFieldFit([referencePrint])

  it('starts from the same first fit and tone weights', () => {
    expect(greatestDifference(every(first), reference.firstFit)).toBeLessThan(2e-3)
    const { coating, exposure } = toneWeights(first, referencePrint.map(p => p.level))
    expect(greatestDifference(coating.slice(0, 8), reference.coating)).toBeLessThan(1e-3)
    expect(greatestDifference(exposure.slice(0, 8), reference.exposure)).toBeLessThan(1e-3)
  })

  it('has the same criterion at the start and at the end of the search', () => {
    const model = wedgeModel([referencePrint], first, 1)
    expect(Math.abs(model.criterion([0.5, 2.3, 2.3]) - reference.criterionAtStart)).toBeLessThan(0.05)
    expect(Math.abs(model.criterion(reference.field as [number, number, number]) - reference.criterion)).toBeLessThan(0.05)
  })

  it('ends in the same curve, field and noise', () => {
    const { response, field, noise } = fitSoundPrints([referencePrint])
    expect(greatestDifference(every(response), reference.curve)).toBeLessThan(0.01)
    expect(greatestDifference(field, reference.field)).toBeLessThan(0.3)
    expect(noise / reference.noise).toBeGreaterThan(0.97)
    expect(noise / reference.noise).toBeLessThan(1.03)
  })
})

describe('the covariance', () => {
  it('is noise, smooth fields and mottle, by hand for two patches', () => {
    const print = [{ x: -0.5, y: 0, xMm: -30, yMm: 0 }, { x: 0.5, y: 0, xMm: 30, yMm: 0 }].map(p => ({ ...p, level: 0, lightness: 50 }))
    const weights = { coating: Float64Array.of(1, 0), exposure: Float64Array.of(0, 1) }
    const smooth = smoothFields(print, weights)
    // P rows: x·(.15 + .85 w_e) and w_c·x; the other columns are level, so 0 once centred: [−.5·.15, −.5·1] and [.5·1, 0].
    expect(smooth[0]).toBeCloseTo(1 + 100 * (0.075 ** 2 + 0.25), 10)
    expect(smooth[2]).toBeCloseTo(100 * (-0.075 * 0.5), 10)
    expect(smooth[3]).toBeCloseTo(1 + 100 * 0.25, 10)
    // Mottle of variance 2 and reach 60 mm along x: distance 1, (1 + √3)·e^(−√3); g is 1 and .15.
    const whole = withMottle(smooth, print, weights.coating, [Math.log(2), Math.log(60), 1])
    expect(whole[2]! - smooth[2]!).toBeCloseTo(2 * 0.15 * (1 + Math.sqrt(3)) * Math.exp(-Math.sqrt(3)), 10)
    expect(whole[3]! - smooth[3]!).toBeCloseTo(2 * 0.15 ** 2, 10)
  })
})

describe('a fitted wedge', () => {
  it('never falls and lies within its bands, the simultaneous one outside the pointwise', () => {
    const { response, low, high, lowOfAll, highOfAll, expectedError } = fitWedge([simulated(2).print])
    for (let i = 0; i < 1025; i++) {
      const sound = lowOfAll[i]! <= low[i]! && low[i]! <= response[i]! && response[i]! <= high[i]! && high[i]! <= highOfAll[i]! && (i === 0 || response[i]! >= response[i - 1]!)
      if (!sound) expect.fail(`value ${i}`)
    }
    expect(expectedError.nextPrint.p95).toBeGreaterThan(expectedError.curve.p95)
  })

  it('does not depend on the order of patches, to the last bit, and leaves them alone', () => {
    const { print } = simulated(4)
    const frozen = print.map(p => Object.freeze({ ...p }))
    const one = fitWedge([frozen])
    const other = fitWedge([[...frozen].reverse()])
    expect([...other.response]).toEqual([...one.response])
    expect([...other.low]).toEqual([...one.low])
    expect(other.used[0]).toEqual([...one.used[0]!].reverse())
  })

  it('is far nearer to the truth than the unevenness of its print, in median', () => {
    const errors = [11, 12, 13, 14, 15].map((seed) => {
      const { system, print } = simulated(seed)
      return rampErrors(system, curveLevels(fitWedge([print]).response, 'even-lightness')).greatest
    }).sort((a, b) => a - b)
    // A print of the typical kind is uneven by ±2 L* and mottled by 1 L*.
    expect(errors[2]).toBeLessThan(0.7)
  })

  it('leaves spoiled patches out: dust and hairs on one in forty', () => {
    const { system, print, random } = simulated(21, printQualities.typical, '24x16')
    const spoiled = new Set(Array.from({ length: 10 }, () => random.below(384)))
    const dirty = print.map((p, i) => spoiled.has(i) ? { ...p, lightness: Math.min(97, Math.max(3, p.lightness + (i % 2 ? 9 : -9))) } : p)
    const { used, response } = fitWedge([dirty])
    const found = [...spoiled].filter(i => !used[0]![i]).length
    expect(found).toBeGreaterThanOrEqual(spoiled.size - 1)
    expect(used[0]!.filter(u => !u).length - found).toBeLessThan(20)
    expect(rampErrors(system, curveLevels(response, 'even-lightness')).greatest).toBeLessThan(1)
  })

  it('drops hardly any patch of a clean print, steep as its tones may be, and hears those it suspects', () => {
    // A system whose first fit cuts a steep tone short: by the residuals alone 17 of its honest patches looked spoiled.
    const { print } = simulated(1041, printQualities.typical, '24x16')
    expect(fitWedge([print]).used[0]!.filter(u => !u).length).toBeLessThanOrEqual(3)
    const fit = fitWedge([simulated(2).print])
    const honest = simulated(2).print.map(p => Object.freeze({ ...p }))
    const suspected = honest.map((_, i) => i % 20 !== 7)
    expect(withSuspectsHeard(honest, suspected, fit).filter(u => !u)).toHaveLength(0)
    const dirty = honest.map((p, i) => i === 27 ? { ...p, lightness: p.lightness + 15 } : p)
    const heard = withSuspectsHeard(dirty, suspected, fit)
    expect(heard.flatMap((u, i) => u ? [] : [i])).toEqual([27])
  })

  it('pools prints: two of them tell more of the next than one', () => {
    const { system, print, random } = simulated(31)
    const second = printWedge(system, layoutWedge({ grid: '16x12', seed: 31 }), printQualities.typical, random)
    const [one, both] = [fitWedge([print]), fitWedge([print, second])]
    expect(both.used.map(u => u.length)).toEqual([192, 192])
    expect(both.expectedError.nextPrint.p95).toBeLessThan(one.expectedError.nextPrint.p95)
  })

  it('tells shadows that reverse from shadows that are level', () => {
    const { print } = simulated(41, printQualities.careful)
    expect(fitWedge([print]).reversal).toBeNull()
    // Bronzed: clear film prints lighter than a little ink, by up to 3.6 L*.
    const bronzed = print.map(p => ({ ...p, lightness: p.lightness + 3.6 * Math.max(0, 1 - p.level / 0.15) ** 1.5 }))
    const steep = bronzed.map(p => p.level < 0.15 ? { ...p, lightness: Math.min(p.lightness, print.find(q => q.level === 0)!.lightness + 3.6 * Math.max(0, 1 - p.level / 0.15) ** 1.5) } : p)
    const { reversal } = fitWedge([steep])
    expect(reversal).not.toBeNull()
    expect(reversal!.rise).toBeGreaterThan(1)
    expect(reversal!.level).toBeLessThan(0.3)
  })

  it('is refused with too few patches or without tones', () => {
    const { print } = simulated(2)
    expect(() => fitWedge([])).toThrowError(expect.objectContaining({ code: 'too_few_levels' }))
    expect(() => fitWedge([print.slice(0, 40)])).toThrowError(expect.objectContaining({ code: 'too_few_levels' }))
    expect(() => fitWedge([print.map(p => ({ ...p, lightness: 50 }))])).toThrowError(expect.objectContaining({ code: 'range_too_small' }))
  })
})
