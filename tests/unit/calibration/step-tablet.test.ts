import { describe, expect, it } from 'vitest'
import { nominalTablet, readTablet, targetStep } from '../../../shared/calibration/step-tablet'
import { lightnessFromDensity } from '../../../shared/tone/density'
import { checkValues } from '../../support/check-values'

interface Sampled { logH: number[], D: number[] }
interface Worked { Dmin: number, Dmax: number, l0: number, k: number }
interface WorkedPoints { 'logHT': number, 'logHS': number, 'R_unrounded': number, 'alternative_reading_D_S=0.9*Dmax': { R_unrounded: number } }

const worked = checkValues<Worked, WorkedPoints>('iso6846.worked')
const logistic = ({ Dmin, Dmax, l0, k }: Worked, logH: number): number => Dmin + (Dmax - Dmin) / (1 + Math.exp(-k * (logH - l0)))
/** A tablet of which density 3 gives log exposure 0. */
const printed = (logHs: number[], densities: number[]) => logHs.map((logH, i) => ({ density: 3 - logH, lightness: lightnessFromDensity(densities[i]!) }))
const fine = Array.from({ length: 301 }, (_, i) => i / 100)
const ends = { paperDensity: worked.input.Dmin, maxDensity: worked.input.Dmax }

describe('a contact-printed step tablet', () => {
  it('has the points of ISO 6846 between sampled steps (PCHIP by scipy)', () => {
    const { input, expected, tolerance } = checkValues<Sampled, { logHT: number, logHS: number }>('iso6846.sampled')
    const { toneBeginsDensity, ninetyPercentDensity, isoRange, exposureScale } = readTablet(printed(input.logH, input.D), ends)
    expect(Math.abs(3 - toneBeginsDensity! - expected.logHT)).toBeLessThan(tolerance)
    expect(Math.abs(3 - ninetyPercentDensity! - expected.logHS)).toBeLessThan(tolerance)
    expect(Math.abs(isoRange! / 100 - (expected.logHS - expected.logHT))).toBeLessThan(2 * tolerance)
    expect(exposureScale).toBe(isoRange! / 100)
  })

  it('says which 90 % it means, and both readings give their own range (worked example)', () => {
    const print = printed(fine, fine.map(logH => logistic(worked.input, logH)))
    const [net, asRead] = [readTablet(print, ends), readTablet(print, { ...ends, ninetyPercentOf: 'density-as-read' })]
    expect(net.ninetyPercentOf).toBe('net-density')
    expect(net.isoRange).toBeCloseTo(worked.expected.R_unrounded, 2)
    expect(asRead.isoRange).toBeCloseTo(worked.expected['alternative_reading_D_S=0.9*Dmax'].R_unrounded, 2)
  })

  it('takes steps in any order, and the mean of equal ones', () => {
    const print = printed(fine, fine.map(logH => logistic(worked.input, logH)))
    expect(readTablet([...print].reverse(), ends)).toEqual(readTablet(print, ends))
    expect(readTablet([...print, ...print], ends).isoRange).toBeCloseTo(readTablet(print, ends).isoRange!, 9)
  })

  it('does not guess where the tablet does not reach', () => {
    const at = (from: number, to: number) => Array.from({ length: 21 }, (_, i) => from + (to - from) * i / 20)
    const short = at(0.6, 3)
    const overexposed = readTablet(printed(short, short.map(logH => logistic(worked.input, logH))), ends)
    expect(overexposed).toMatchObject({ exposureScale: null, isoRange: null, toneBeginsDensity: null })
    expect(overexposed.warnings.map(w => w.code)).toEqual(['tablet_ends_in_tone'])
    const underexposed = at(-1.5, 1.3)
    expect(readTablet(printed(underexposed, underexposed.map(logH => logistic(worked.input, logH)))).warnings.map(w => w.code)).toEqual(['tablet_not_black'])
  })

  it('is refused with too few steps, or none that differ', () => {
    expect(() => readTablet(printed([0, 1, 2, 3], [0.1, 0.5, 1, 1.4]))).toThrowError(expect.objectContaining({ code: 'too_few_levels' }))
    expect(() => readTablet(printed([0, 1, 2, 2.5, 3], [0.1, 0.1, 0.1, 0.11, 0.12]))).toThrowError(expect.objectContaining({ code: 'range_too_small' }))
    expect(() => readTablet([{ density: -1, lightness: 50 }])).toThrowError(expect.objectContaining({ code: 'invalid_input' }))
  })
})

describe('the tablet', () => {
  it('has 21 nominal steps of 0.15', () => {
    const { expected } = checkValues<unknown, { D: number[] }>('tablet.21')
    nominalTablet().forEach((density, i) => expect(density).toBeCloseTo(expected.D[i]!, 12))
  })

  it('tells by its last full black when the exposure is the base exposure', () => {
    // Full black needs log exposure 0.7 less than the tablet's own print had: density 0.7. Derived by counting steps.
    const print = { ...readTablet(printed(fine, fine.map(logH => logistic(worked.input, logH))), ends), fullBlackDensity: 0.7 }
    expect(targetStep(print, nominalTablet(), 300, 300)).toMatchObject({ step: 5, density: 0.65 })
    expect(targetStep(print, nominalTablet(), 300, 300)!.spare).toBeCloseTo(0.05, 9)
    // A stop more reaches 0.301 further: density 1.001, two steps on
    expect(targetStep(print, nominalTablet(), 300, 600)).toMatchObject({ step: 7, density: 0.95 })
    expect(targetStep(print, nominalTablet(), 300, 50)).toBeNull()
  })
})
