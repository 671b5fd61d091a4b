import { describe, expect, it } from 'vitest'
import { densityFromLightness, densityFromReflectance, lightnessFromDensity, reflectanceFromDensity } from '../../../shared/tone/density'
import { lightnessFromLuminance, luminanceFromLightness } from '../../../shared/tone/lightness'
import { linearToSrgb, srgbToLinear } from '../../../shared/tone/srgb'
import { checkValues, greatestDifference } from '../../support/check-values'

describe('CIE lightness', () => {
  it('gives the standard\'s L* of luminances', () => {
    const { input, expected, tolerance } = checkValues<{ Y_over_Yn: number[] }, { Lstar: number[] }>('cielab.Lstar')
    expect(greatestDifference(input.Y_over_Yn.map(lightnessFromLuminance), expected.Lstar)).toBeLessThanOrEqual(tolerance)
    expect(greatestDifference(expected.Lstar.map(luminanceFromLightness), input.Y_over_Yn)).toBeLessThanOrEqual(1e-12)
  })

  it('rises through both parts and comes back by its inverse', () => {
    let before = -1
    for (let i = 0; i <= 20_000; i++) {
      const lightness = lightnessFromLuminance(i / 20_000)
      expect(lightness).toBeGreaterThan(before)
      expect(Math.abs(luminanceFromLightness(lightness) - i / 20_000)).toBeLessThan(1e-14)
      before = lightness
    }
  })

  it.each([Number.NaN, Number.POSITIVE_INFINITY, -1e-9, 11])('refuses luminance %s', (luminance) => {
    expect(() => lightnessFromLuminance(luminance)).toThrowError(expect.objectContaining({ code: 'invalid_input' }))
  })
})

describe('density', () => {
  it('is −log₁₀ of reflectance', () => {
    const { input, expected, tolerance } = checkValues<{ R_or_T: number[] }, { D: number[] }>('dens.definition')
    expect(greatestDifference(input.R_or_T.map(densityFromReflectance), expected.D)).toBeLessThanOrEqual(tolerance)
    expect(greatestDifference(input.R_or_T.map(r => reflectanceFromDensity(densityFromReflectance(r))), input.R_or_T)).toBeLessThan(1e-14)
  })

  it('of a stop is log₁₀ 2', () => {
    const { input, expected, tolerance } = checkValues<{ stops: number[] }, { logH: number[] }>('dens.stop')
    expect(greatestDifference(input.stops.map(stops => densityFromReflectance(2 ** -stops)), expected.logH)).toBeLessThanOrEqual(tolerance)
  })

  it('of a neutral surface converts to L* and back', () => {
    const { input, expected, tolerance } = checkValues<{ D: number[] }, { Lstar: number[] }>('dens.to.Lstar')
    expect(greatestDifference(input.D.map(lightnessFromDensity), expected.Lstar)).toBeLessThanOrEqual(tolerance)
    expect(greatestDifference(expected.Lstar.map(densityFromLightness), input.D)).toBeLessThan(1e-9)
  })

  it('of white is a plain zero', () => {
    expect(Object.is(densityFromReflectance(1), 0)).toBe(true)
  })

  it('refuses what has none', () => {
    for (const f of [() => densityFromReflectance(0), () => densityFromLightness(0), () => reflectanceFromDensity(Number.NaN), () => lightnessFromDensity(7)])
      expect(f).toThrowError(expect.objectContaining({ code: 'invalid_input' }))
  })
})

describe('sRGB', () => {
  it('decodes as the standard says', () => {
    const { input, expected, tolerance } = checkValues<{ code8: number[] }, { linear: number[] }>('srgb.decode')
    expect(greatestDifference(input.code8.map(code => srgbToLinear(code / 255)), expected.linear)).toBeLessThanOrEqual(tolerance)
  })

  it('encodes as the standard says', () => {
    const { input, expected, tolerance } = checkValues<{ linear: number[] }, { encoded: number[], code8_rounded: number[] }>('srgb.encode')
    const encoded = input.linear.map(linearToSrgb)
    expect(greatestDifference(encoded, expected.encoded)).toBeLessThanOrEqual(tolerance)
    expect(encoded.map(e => Math.round(255 * e))).toEqual(expected.code8_rounded)
  })

  it('takes every 8-bit code through linear light and back', () => {
    for (let code = 0; code < 256; code++) expect(Math.round(255 * linearToSrgb(srgbToLinear(code / 255)))).toBe(code)
  })

  it('gives grey 128 the L* of its light', () => {
    const { input, expected } = checkValues<{ code8: number }, { Lstar_of_sRGB128: number }>('gray.midpoint')
    expect(lightnessFromLuminance(srgbToLinear(input.code8 / 255))).toBeCloseTo(expected.Lstar_of_sRGB128, 11)
  })

  it('refuses values outside 0 … 1', () => {
    for (const value of [-0.01, 1.01, Number.NaN]) {
      expect(() => srgbToLinear(value)).toThrowError(expect.objectContaining({ code: 'invalid_input' }))
      expect(() => linearToSrgb(value)).toThrowError(expect.objectContaining({ code: 'invalid_input' }))
    }
  })
})
