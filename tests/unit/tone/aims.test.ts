import { describe, expect, it } from 'vitest'
import { aims } from '../../../shared/schemas/curves'
import { aimForChannel, printLightnessForTone } from '../../../shared/tone/aims'
import { densityFromLightness, lightnessFromDensity } from '../../../shared/tone/density'
import { lightnessFromLuminance, luminanceFromLightness } from '../../../shared/tone/lightness'

describe('aims', () => {
  it.each(aims)('%s meets both ends exactly and rises between them', (aim) => {
    for (const [black, white] of [[26.8, 95], [0, 100], [12.3, 88.8], [40, 92]] as const) {
      expect(printLightnessForTone(0, aim, black, white)).toBe(black)
      expect(printLightnessForTone(1, aim, black, white)).toBe(white)
      for (let i = 1; i <= 1000; i++)
        expect(printLightnessForTone(i / 1000, aim, black, white)).toBeGreaterThan(printLightnessForTone((i - 1) / 1000, aim, black, white))
    }
  })

  it('spread tones evenly in lightness', () => {
    expect(printLightnessForTone(0.25, 'even-lightness', 20, 96)).toBe(39)
  })

  it('keep middle tones: photo L* 50 on a print of Dmax 1.3 lands near 52, not near 61', () => {
    const black = lightnessFromDensity(1.3)
    expect(printLightnessForTone(0.5, 'keep-middle-tones', black, 95)).toBeCloseTo(52, 0)
    expect(printLightnessForTone(0.5, 'even-lightness', black, 95)).toBeCloseTo(61, 0)
  })

  it('keep middle tones by a straight line in luminance', () => {
    const middle = (luminanceFromLightness(30) + luminanceFromLightness(90)) / 2
    const tone = lightnessFromLuminance(0.5) / 100
    expect(printLightnessForTone(tone, 'keep-middle-tones', 30, 90)).toBeCloseTo(lightnessFromLuminance(middle), 10)
  })

  it('spread tones evenly in density', () => {
    const [deep, light] = [densityFromLightness(20), densityFromLightness(95)]
    for (const tone of [0.1, 0.5, 0.9])
      expect(densityFromLightness(printLightnessForTone(tone, 'even-density', 20, 95))).toBeCloseTo(deep + tone * (light - deep), 12)
  })

  it('are even in density for a density channel', () => {
    expect(aimForChannel('even-lightness', 'density-blue')).toBe('even-density')
    expect(aimForChannel('keep-middle-tones', 'lightness')).toBe('keep-middle-tones')
    expect(aimForChannel('even-lightness', 'colour-path')).toBe('even-lightness')
  })

  it('are refused without a range or with a tone outside 0 … 1', () => {
    expect(() => printLightnessForTone(0.5, 'even-lightness', 50, 50)).toThrowError(expect.objectContaining({ code: 'range_too_small' }))
    for (const args of [[1.1, 20, 90], [Number.NaN, 20, 90], [0.5, -1, 90], [0.5, 20, Number.NaN]] as const)
      expect(() => printLightnessForTone(args[0], 'even-density', args[1], args[2])).toThrowError(expect.objectContaining({ code: 'invalid_input' }))
  })
})
