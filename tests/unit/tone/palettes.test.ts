import { converter } from 'culori'
import { describe, expect, it } from 'vitest'
import { processes } from '../../../shared/schemas/benches'
import { otherLooks } from '../../../shared/tone/looks'
import { buildPaletteTable, lightTableLightness, lightTableLightnesses, lookColour } from '../../../shared/tone/palettes'
import type { Rgb8 } from '../../../shared/tone/palettes'

const toLab = converter('lab')
/** CIELAB D50 by culori, an implementation not ours. */
function labOf([r, g, b]: Rgb8): { l: number, a: number, b: number } {
  return toLab({ mode: 'rgb', r: r / 255, g: g / 255, b: b / 255 })
}
const looks = [...processes, ...otherLooks]

describe('print colours', () => {
  it.each(looks)('of %s have the lightness they stand for, within the rounding to 8 bits', (look) => {
    for (let lightness = 0; lightness <= 100; lightness += 0.5)
      expect(Math.abs(labOf(lookColour(look, lightness)).l - lightness), `L* ${lightness}`).toBeLessThan(0.6)
  })

  it.each(looks)('of %s change by small steps', (look) => {
    for (let lightness = 0.5; lightness <= 100; lightness += 0.5) {
      const [from, to] = [labOf(lookColour(look, lightness - 0.5)), labOf(lookColour(look, lightness))]
      expect(Math.hypot(from.l - to.l, from.a - to.a, from.b - to.b), `L* ${lightness}`).toBeLessThan(4)
    }
  })

  it('follow a bench’s own path, whichever end it begins with, and hold its ends beyond them', () => {
    const path = [[22, 4, -24], [55, -6, -20], [94, 1, 4]] as const
    for (const [l, a, b] of path) {
      const shown = labOf(lookColour(path, l))
      expect(Math.hypot(shown.l - l, shown.a - a, shown.b - b), `L* ${l}`).toBeLessThan(0.8)
    }
    expect(Math.abs(labOf(lookColour(path, 15)).b + 24)).toBeLessThan(1)
    const tones = Float64Array.from({ length: 65536 }, (_, i) => i / 655.35)
    expect(buildPaletteTable([...path].reverse(), tones)).toEqual(buildPaletteTable(path, tones))
    expect(buildPaletteTable(path, tones)).not.toEqual(buildPaletteTable('cyanotype', tones))
  })

  it('do not mind a path that wavers where white or black is level', () => {
    const path = [[22, 4, -24], [22.01, 5, -20], [22.01, 4, -25], [55, -6, -20], [94, 1, 4], [94, 2, 5]] as const
    expect(Math.abs(labOf(lookColour(path, 40)).l - 40)).toBeLessThan(0.8)
    expect(lookColour(path, 55)).toEqual(lookColour([path[0], path[3], path[4]], 55))
  })

  it('tell the processes apart: cyanotype is blue, Van Dyke brown, platinum near neutral', () => {
    const middle = (look: typeof looks[number]) => labOf(lookColour(look, 45))
    expect(middle('cyanotype').b).toBeLessThan(-25)
    expect(middle('van-dyke').b).toBeGreaterThan(12)
    expect(Math.hypot(middle('platinum-palladium').a, middle('platinum-palladium').b)).toBeLessThan(9)
    expect(middle('unexposed').b).toBeGreaterThan(25)
  })

  it('hold lightnesses beyond the ends', () => {
    expect(lookColour('cyanotype', 130)).toEqual(lookColour('cyanotype', 100))
    expect(lookColour('cyanotype', -5)).toEqual([0, 0, 0])
  })
})

describe('the dim room\'s amber', () => {
  it('has no blue, rises, and ends in the theme\'s ground and text', () => {
    let before = 0
    for (let lightness = 0; lightness <= 100; lightness += 0.25) {
      const [red, green, blue] = lookColour('dim', lightness)
      expect(blue).toBe(0)
      expect(red + green).toBeGreaterThanOrEqual(before)
      before = red + green
    }
    expect(lookColour('dim', 0)).toEqual([0x12, 0x04, 0])
    expect(lookColour('dim', 100)).toEqual([0xFF, 0xA0, 0])
  })
})

describe('palette table', () => {
  it('holds canvas pixels: red first, opaque', () => {
    const table = buildPaletteTable('dim', Float64Array.from({ length: 65536 }, (_, code) => code / 655.35))
    expect([...new Uint8Array(table.buffer, 0, 4)]).toEqual([0x12, 0x04, 0, 255])
    expect([...new Uint8Array(table.buffer, 4 * 65535, 4)]).toEqual([0xFF, 0xA0, 0, 255])
  })

  it('shows each lightness within 0.1 L* and the rounding to 8 bits', () => {
    const lightnesses = Float64Array.from({ length: 65536 }, (_, code) => 22 + 70 * code / 65535)
    const bytes = new Uint8Array(buildPaletteTable('cyanotype', lightnesses).buffer)
    for (let code = 0; code < 65536; code += 257)
      expect(Math.abs(labOf([bytes[4 * code]!, bytes[4 * code + 1]!, bytes[4 * code + 2]!]).l - lightnesses[code]!)).toBeLessThan(0.6)
  })

  it('needs a whole lightness table', () => {
    expect(() => buildPaletteTable('photo', [1, 2, 3])).toThrowError(expect.objectContaining({ code: 'invalid_input' }))
  })
})

describe('film on the light table', () => {
  it('darkens with ink, from nearly white', () => {
    expect(lightTableLightness(0)).toBeGreaterThan(93)
    expect(lightTableLightness(1)).toBeLessThan(12)
    for (let i = 1; i <= 100; i++) expect(lightTableLightness(i / 100)).toBeLessThan(lightTableLightness((i - 1) / 100))
  })

  it('is the same for whole tables', () => {
    const levels = Float64Array.from({ length: 65536 }, (_, i) => (i / 65535) ** 2)
    const table = lightTableLightnesses(levels)
    levels.forEach((level, i) => { if (!(Math.abs(table[i]! - lightTableLightness(level)) < 1e-4)) expect.fail(`level ${level}`) })
  })
})
