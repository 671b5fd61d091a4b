import { describe, expect, it } from 'vitest'
import { seededRandom } from '../../../shared/calibration/random'
import { adjustments as schema } from '../../../shared/schemas/negatives'
import type { ToneAdjustments } from '../../../shared/tone/adjustments'
import { adjustTone, adjustedTones, neutralAdjustments } from '../../../shared/tone/adjustments'

const codeTones = Float64Array.from({ length: 65536 }, (_, code) => code / 65535)

function anySettings(seed: number): ToneAdjustments {
  const random = seededRandom(seed)
  const edge = (least: number, greatest: number): number => [least, greatest, least + (greatest - least) * random.uniform()][random.below(3)]!
  const blackPoint = edge(0, 0.9)
  return { blackPoint, whitePoint: edge(Math.max(0.1, blackPoint + 0.05), 1), midtone: edge(-1, 1), contrast: edge(-1, 1) }
}

describe('neutral adjustments', () => {
  it('change no bit of any code\'s tone', () => {
    expect(adjustedTones(neutralAdjustments).every((tone, code) => Object.is(tone, codeTones[code]))).toBe(true)
  })

  it('are the schema\'s defaults', () => {
    const { mix, ...tone } = schema.parse({})
    expect(tone).toEqual(neutralAdjustments)
    expect(mix).toEqual({ red: 1, green: 1, blue: 1 })
  })
})

describe('any adjustments within the schema', () => {
  it('never fall, stay within 0 … 1, and meet black and white point exactly', () => {
    for (let seed = 0; seed < 40; seed++) {
      const settings = anySettings(seed)
      expect(schema.safeParse(settings).success, JSON.stringify(settings)).toBe(true)
      const tones = adjustedTones(settings)
      for (let code = 1; code < 65536; code++) if (!(tones[code]! >= tones[code - 1]!)) expect.fail(`falls at ${code}: ${JSON.stringify(settings)}`)
      expect(tones[0]).toBe(0)
      expect(tones[65535]).toBe(1)
      expect(adjustTone(settings.blackPoint, settings)).toBe(0)
      expect(adjustTone(settings.whitePoint, settings)).toBe(1)
    }
  })

  it('rise strictly between the points, away from the last bits at the ends', () => {
    for (let seed = 0; seed < 30; seed++) {
      const settings = anySettings(seed)
      const at = (share: number): number => adjustTone(settings.blackPoint + share * (settings.whitePoint - settings.blackPoint), settings)
      for (let i = 1; i < 100; i++) expect(at((i + 1) / 101)).toBeGreaterThan(at(i / 101))
    }
  })
})

describe('the formulas', () => {
  it('stretch between the points', () => {
    const settings = { ...neutralAdjustments, blackPoint: 0.2, whitePoint: 0.7 }
    expect(adjustTone(0.45, settings)).toBeCloseTo(0.5, 15)
    expect(adjustTone(0.1, settings)).toBe(0)
    expect(adjustTone(0.9, settings)).toBe(1)
  })

  it('lift the middle by a power', () => {
    expect(adjustTone(0.25, { ...neutralAdjustments, midtone: 1 })).toBeCloseTo(0.5, 15)
    expect(adjustTone(0.5, { ...neutralAdjustments, midtone: -1 })).toBeCloseTo(0.25, 15)
  })

  it('turn contrast about the middle, symmetrically, and back by its negative', () => {
    // By hand: ½ + ½·tanh(4·0.25)/tanh(2) = ½ + ½·0.761594/0.964028.
    expect(adjustTone(0.75, { ...neutralAdjustments, contrast: 1 })).toBeCloseTo(0.895006, 6)
    for (const contrast of [-1, -0.4, 1e-9, 0.03, 0.6, 1]) {
      const settings = { ...neutralAdjustments, contrast }
      expect(adjustTone(0.5, settings)).toBeCloseTo(0.5, 15)
      for (const tone of [0.01, 0.2, 0.37, 0.8, 0.99]) {
        expect(adjustTone(tone, settings) + adjustTone(1 - tone, settings)).toBeCloseTo(1, 14)
        expect(adjustTone(adjustTone(tone, settings), { ...settings, contrast: -contrast })).toBeCloseTo(tone, 12)
      }
    }
  })

  it('pass smoothly into neutral', () => {
    for (const contrast of [1e-300, 1e-12, 1e-7, 1e-6, 3e-6, -1e-7, -3e-6])
      expect(Math.abs(adjustTone(0.3, { ...neutralAdjustments, contrast }) - 0.3)).toBeLessThan(1e-9)
  })
})

describe('settings and tones out of range', () => {
  it.each([
    { blackPoint: -0.1 }, { blackPoint: Number.NaN }, { whitePoint: 1.1 }, { blackPoint: 0.5, whitePoint: 0.52 }, { midtone: 1.2 }, { contrast: Number.NaN },
  ])('%o are refused', (change) => {
    expect(() => adjustTone(0.5, { ...neutralAdjustments, ...change })).toThrowError(expect.objectContaining({ code: 'invalid_input' }))
  })

  it('tones outside 0 … 1 are refused', () => {
    for (const tone of [-0.001, 1.001, Number.NaN]) expect(() => adjustTone(tone, neutralAdjustments)).toThrowError(expect.objectContaining({ code: 'invalid_input' }))
  })
})
