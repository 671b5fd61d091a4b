import { describe, expect, it } from 'vitest'
import { curvePoints } from '../../../shared/calibration/curve'
import { starterResponse } from '../../../shared/calibration/starter'
import { aims } from '../../../shared/schemas/curves'
import { adjustTone, neutralAdjustments } from '../../../shared/tone/adjustments'
import { printLightnessForTone } from '../../../shared/tone/aims'
import { buildForecastTable, buildLevelTable, filmCodes, inkChannels, inkLevelForLightness } from '../../../shared/tone/levels'
import { positionOf, valueAt } from '../../../shared/tone/response'

/** A response that is known in closed form: L* = 20 + 75·n². */
const square = Array.from({ length: 1025 }, (_, i) => 20 + 75 * (i / 1024) ** 2)

describe('ink level for a lightness', () => {
  it('inverts the response, clamped at both ends', () => {
    for (const level of [0.01, 0.3, 0.5, 0.77, 0.999]) expect(inkLevelForLightness(square, 20 + 75 * level ** 2)).toBeCloseTo(level, 4)
    expect(inkLevelForLightness(square, 20)).toBe(0)
    expect(inkLevelForLightness(square, 3)).toBe(0)
    expect(inkLevelForLightness(square, 95)).toBe(1)
    expect(inkLevelForLightness(square, 100)).toBe(1)
  })

  it('comes back by the response', () => {
    for (let i = 0; i <= 3000; i++) {
      const lightness = 20 + 75 * i / 3000
      expect(Math.abs(valueAt(square, inkLevelForLightness(square, lightness)) - lightness)).toBeLessThan(1e-10)
    }
  })

  it('takes the least level where the response stays level', () => {
    expect(positionOf([10, 20, 20, 20, 30], 20)).toBe(0.25)
    expect(positionOf([10, 10, 10, 30], 10)).toBe(0)
  })

  it('refuses what is no response', () => {
    const falling = square.map((v, i) => i === 500 ? v - 10 : v)
    for (const [response, code] of [[[1, 2, 3], 'invalid_input'], [falling, 'invalid_input'], [square.map(() => Number.NaN), 'invalid_input'], [square.map(() => 50), 'range_too_small']] as const)
      expect(() => inkLevelForLightness(response, 50)).toThrowError(expect.objectContaining({ code }))
    expect(() => inkLevelForLightness(square, Number.NaN)).toThrowError(expect.objectContaining({ code: 'invalid_input' }))
  })
})

describe('level table', () => {
  const adjustments = { blackPoint: 0.05, whitePoint: 0.9, midtone: 0.2, contrast: 0.4 }

  it.each(aims)('with %s is the straight line between the published curve\'s points', (aim) => {
    const points = curvePoints(square, null, null, aim)
    const table = buildLevelTable({ adjustments, aim, response: square })
    for (let code = 0; code < 65536; code += 13) {
      const place = adjustTone(code / 65535, adjustments) * 1024
      const below = Math.min(1023, Math.floor(place))
      const wanted = points[below]!.level + (points[below + 1]!.level - points[below]!.level) * (place - below)
      expect(Math.abs(table[code]! - wanted)).toBeLessThan(1e-12)
    }
  })

  it.each(aims)('with %s never falls and runs from clear film to full ink', (aim) => {
    for (const process of ['cyanotype', 'gum', 'salt'] as const) {
      const table = buildLevelTable({ adjustments, aim, response: starterResponse(process).response })
      expect(table[0]).toBe(0)
      expect(table[65535]).toBe(1)
      for (let code = 1; code < 65536; code++) if (!(table[code]! >= table[code - 1]!)) expect.fail(`falls at ${code}`)
    }
  })

  it('meets the aim on the print', () => {
    const forecast = buildForecastTable({ adjustments: neutralAdjustments, aim: 'keep-middle-tones', response: square })
    for (let code = 0; code < 65536; code += 101)
      expect(Math.abs(forecast[code]! - printLightnessForTone(code / 65535, 'keep-middle-tones', 20, 95))).toBeLessThan(0.02)
  })

  it('leaves its inputs as they were', () => {
    const response = Float64Array.from(square)
    buildForecastTable({ adjustments: Object.freeze({ ...adjustments }), aim: 'even-density', response })
    expect([...response]).toEqual(square)
  })
})

describe('film codes', () => {
  it('are 65535 · (1 − level) of black ink, black for full ink', () => {
    const levels = Float64Array.of(0, 0.25, 0.5, 1)
    expect([...filmCodes(levels)]).toEqual([65535, Math.round(65535 * 0.75), 32768, 0])
  })

  it('of another ink take away only what the ink takes', () => {
    expect([...filmCodes(Float64Array.of(0, 0.5, 1), 51)]).toEqual([65535, Math.round(65535 * 0.6), Math.round(65535 * 0.2)])
    expect([...filmCodes(Float64Array.of(0, 1), 255)]).toEqual([65535, 65535])
    expect(inkChannels('#3366FF')).toEqual([51, 102, 255])
    expect(() => inkChannels('blue')).toThrowError(expect.objectContaining({ code: 'invalid_input' }))
  })
})
