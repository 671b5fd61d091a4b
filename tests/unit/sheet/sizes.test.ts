import { describe, expect, it } from 'vitest'
import { filmPixels, mmFromPixels, pixelsFromMm } from '../../../shared/sheet/pixels'
import { formatLengthMm, formatSize, namedSizes, parseLengthMm, parseSize } from '../../../shared/sheet/sizes'
import { checkValues } from '../../support/check-values'

interface Media { mm: [number, number], px_300: [number, number], px_360: [number, number], px_720: [number, number] }
const media = checkValues<unknown, Record<string, Media>>('media.sizes').expected

describe('named sizes', () => {
  /** Our names of the sizes that the Printer Working Group registers. */
  const registered: Record<string, string> = {
    A5: 'iso_a5_148x210mm', A4: 'iso_a4_210x297mm', A3: 'iso_a3_297x420mm', A2: 'iso_a2_420x594mm', B5: 'iso_b5_176x250mm', B4: 'iso_b4_250x353mm',
    '8.5 × 11 in': 'na_letter_8.5x11in', '13 × 19 in': 'na_super-b_13x19in', '17 × 22 in': 'na_c_17x22in', '5 × 7 in': 'na_5x7_5x7in',
    '8 × 10 in': 'na_govt-letter_8x10in', '11 × 14 in': 'na_edp_11x14in', '10 × 12 in': 'oe_photo-10r_10x12in', '16 × 20 in': 'oe_photo-16r_16x20in', '12 × 18 in': 'na_arch-b_12x18in',
  }

  it.each(Object.entries(registered))('%s is %s', (name, key) => {
    const size = namedSizes.find(s => s.name === name)!
    expect(size.widthMm).toBeCloseTo(media[key]!.mm[0], 9)
    expect(size.heightMm).toBeCloseTo(media[key]!.mm[1], 9)
  })

  it('have names of their own and stand upright', () => {
    expect(new Set(namedSizes.map(s => s.name)).size).toBe(namedSizes.length)
    expect(namedSizes.every(s => s.widthMm < s.heightMm)).toBe(true)
  })
})

describe('a written size', () => {
  it.each([
    ['18 x 24 cm', 180, 240], ['18x24cm', 180, 240], ['8x10 in', 203.2, 254], ['8" × 10"', 203.2, 254], ['8 by 10 inches', 203.2, 254],
    ['180 × 240', 180, 240], ['20,3 × 25,4 cm', 203, 254], [' 12.5X17.5 CM ', 125, 175], ['A4', 210, 297], ['a4 landscape', 297, 210], ['10 cm x 5 in', 100, 127],
    ['0.2 m x 300 mm', 200, 300],
  ])('%s is %d × %d mm', (text, widthMm, heightMm) => {
    const size = parseSize(text)
    expect(size.widthMm).toBeCloseTo(widthMm, 9)
    expect(size.heightMm).toBeCloseTo(heightMm, 9)
  })

  it('without a unit is in the person\'s own', () => {
    expect(parseSize('18 x 24', 'cm')).toEqual({ widthMm: 180, heightMm: 240 })
    expect(parseLengthMm('0,5', 'in')).toBeCloseTo(12.7, 12)
  })

  it.each(['', '18', '18 x', 'x 24 cm', '18 x 24 parsec', '-18 x 24', '0 x 10', '1e3 x 4', '1,2,3 x 4', 'A9', 'NaN x 4', '18 x 24 x 30'])('%j is refused', (text) => {
    expect(() => parseSize(text)).toThrowError(expect.objectContaining({ code: 'invalid_input' }))
  })

  it('of one length allows zero, as for a margin', () => {
    expect(parseLengthMm('0')).toBe(0)
    expect(parseLengthMm('1,2 cm')).toBeCloseTo(12, 12)
    expect(() => parseLengthMm('wide')).toThrowError(expect.objectContaining({ code: 'invalid_input' }))
  })
})

describe('a shown size', () => {
  it('is written in the unit and the locale\'s figures, and read back', () => {
    expect(formatSize({ widthMm: 203.2, heightMm: 254 })).toBe('203.2 × 254 mm')
    expect(formatSize({ widthMm: 203.2, heightMm: 254 }, 'in')).toBe('8 × 10 in')
    expect(formatSize({ widthMm: 203.2, heightMm: 254 }, 'cm', 'de')).toBe('20,3 × 25,4 cm')
    expect(formatLengthMm(12.5, 'mm', 'fr')).toBe('12,5 mm')
    for (const size of namedSizes) expect(parseSize(formatSize(size, size.unit)).widthMm).toBeCloseTo(size.widthMm, 9)
  })
})

describe('pixels', () => {
  it.each(Object.entries(media))('of %s at 300, 360 and 720 per inch are the tabulated ones', (_, { mm, ...tabulated }) => {
    for (const [key, pixels] of Object.entries(tabulated).filter(([k]) => k.startsWith('px_')))
      expect(mm.map(side => pixelsFromMm(side, Number(key.slice(3))))).toEqual(pixels)
  })

  it('of a film are the rounded size and twice the rounded margin', () => {
    // 100 mm at 360: 1417.3; 3.5 mm: 49.6
    expect(filmPixels(100, 3.5, 360)).toBe(1417 + 2 * 50)
    expect(mmFromPixels(360, 360)).toBeCloseTo(25.4, 12)
  })

  it('are refused for lengths and resolutions that are none', () => {
    for (const [mm, ppi] of [[-1, 300], [Number.NaN, 300], [100, 0], [100, Number.POSITIVE_INFINITY]] as const)
      expect(() => pixelsFromMm(mm, ppi)).toThrowError(expect.objectContaining({ code: 'invalid_input' }))
  })
})
