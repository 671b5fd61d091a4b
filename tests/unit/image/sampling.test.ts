// Expected values are derived: L* of half the light is 116·∛½ − 16 = 76.07 (CIE 15:2004); Keys' cubic reproduces straight lines.
import { describe, expect, it } from 'vitest'
import { pngFile } from '../../support/pictures/png-file'
import { filmOrder, openWorkbench, tonesFrom, wholePicture } from '../../support/pictures/workbench'

const bench = openWorkbench()
const tonesOf = async (path: string, w: number, h: number, geometry = wholePicture) =>
  tonesFrom(bench.vipsSamples((await bench.film(path, filmOrder(w, h, { geometry }))).target))
const range = (tones: Uint16Array) => tones.reduce(([low, high], code) => [Math.min(low!, code / 655.35), Math.max(high!, code / 655.35)], [100, 0])
const halfLight = 116 * Math.cbrt(0.5) - 16

describe('a checker of single black and white pixels', () => {
  const side = 600
  const path = bench.keep(pngFile({ width: side, height: side, bitDepth: 8, channels: 1, samples: Array.from({ length: side * side }, (_, i) => (i + Math.floor(i / side)) % 2 * 255) }))

  it.each([400, 359, 300, 261, 200, 151, 77, 20])('reduced to %i pixels is L* 76 ± 0.5 everywhere, corners included', async (size) => {
    const [low, high] = range(await tonesOf(path, size, size))
    expect(low).toBeGreaterThan(halfLight - 0.5)
    expect(high).toBeLessThan(halfLight + 0.5)
  })

  it.each([[90, -33], [60, 12], [21, 5]])('straightened and reduced to %i pixels it is too (%i degrees)', async (size, straightenDegrees) => {
    const middle = { ...wholePicture, straightenDegrees, crop: { x: 0.35, y: 0.35, width: 0.3, height: 0.3 } }
    const [low, high] = range(await tonesOf(path, size, size, middle))
    expect(low).toBeGreaterThan(halfLight - 0.5)
    expect(high).toBeLessThan(halfLight + 0.5)
  })

  it('stays as it is at its own size', async () => {
    const tones = await tonesOf(path, side, side)
    expect(tones.slice(0, 6)).toEqual(Uint16Array.of(0, 65535, 0, 65535, 0, 65535))
    expect(new Set(tones)).toEqual(new Set([0, 65535]))
  })
})

describe('sampling', () => {
  it('leaves an even grey even at any size', async () => {
    const path = bench.keep(pngFile({ width: 50, height: 40, bitDepth: 16, channels: 1, samples: new Uint16Array(2000).fill(23456) }))
    const [own] = await tonesOf(path, 50, 40)
    for (const [w, h] of [[51, 41], [125, 100], [49, 39], [20, 16], [1, 1], [75, 60]] as const) {
      for (const tone of await tonesOf(path, w, h)) expect(Math.abs(tone - own!), `${w} × ${h}`).toBeLessThanOrEqual(1)
    }
  })

  it('enlarges a straight ramp of tones to a straight ramp', async () => {
    // A grey ramp whose stored codes are L*: an L*-coded picture is made by taking tones as they come out and comparing steps.
    const width = 64
    const path = bench.keep(pngFile({ width, height: 4, bitDepth: 16, channels: 1, samples: Array.from({ length: 4 * width }, (_, i) => i % width * 1000) }))
    const own = await tonesOf(path, width, 4)
    const double = await tonesOf(path, 2 * width, 8)
    for (let x = 24; x < 2 * width - 8; x++) {
      const place = (x + 0.5) / 2 - 0.5, below = Math.floor(place)
      const straight = own[below]! + (place - below) * (own[below + 1]! - own[below]!)
      expect(Math.abs(double[2 * width + x]! - straight)).toBeLessThan(25)
    }
  })

  it('keeps the mean light of a real structure when it reduces', async () => {
    const side = 240
    const samples = Array.from({ length: side * side }, (_, i) => (Math.floor(i / side) % 5 === 0 || i % 7 === 0) ? 255 : 0)
    const path = bench.keep(pngFile({ width: side, height: side, bitDepth: 8, channels: 1, samples }))
    const mean = samples.reduce<number>((sum, v) => sum + v / 255, 0) / samples.length
    const [tone] = await tonesOf(path, 1, 1)
    // one pixel of a tent weighs the middle more; the pattern is even enough
    expect(Math.abs(tone! / 655.35 - (116 * Math.cbrt(mean) - 16))).toBeLessThan(0.5)
  })

  it('never leaves 0 … 1 beside a hard edge', async () => {
    const path = bench.keep(pngFile({ width: 40, height: 3, bitDepth: 8, channels: 1, samples: Array.from({ length: 120 }, (_, i) => i % 40 < 20 ? 0 : 255) }))
    const row = (await tonesOf(path, 133, 10)).slice(0, 133)
    const edge = row.findIndex(tone => tone > 0)
    expect(row.slice(0, edge).every(tone => tone === 0)).toBe(true)
    expect(row.slice(edge + 9).every(tone => tone === 65535)).toBe(true)
  })
})
