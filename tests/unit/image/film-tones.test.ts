// Expected values: colorjs.io for L* (D50) of sRGB greys; the curve is inverted here by plain search, independent of shared/tone.
import Color from 'colorjs.io'
import { describe, expect, it } from 'vitest'
import { pngFile } from '../../support/pictures/png-file'
import { filmOrder, neutral, openWorkbench } from '../../support/pictures/workbench'

const bench = openWorkbench()
/** A known response: L* 18 … 95, steep at first, as a dot-gaining film on a toe-heavy paper may be. */
const response = Array.from({ length: 1025 }, (_, i) => 18 + 77 * (i / 1024) ** 0.6)

function levelFor(lightness: number): number {
  if (lightness <= response[0]!) return 0
  const above = response.findIndex(l => l >= lightness)
  if (above < 0) return 1
  return (above - 1 + (lightness - response[above - 1]!) / (response[above]! - response[above - 1]!)) / 1024
}
/** The curve: straight lines between 1025 even steps of tone. */
const points = Array.from({ length: 1025 }, (_, i) => levelFor(18 + 77 * i / 1024))
function level(tone: number): number {
  const below = Math.min(1023, Math.floor(tone * 1024))
  return points[below]! + (tone * 1024 - below) * (points[below + 1]! - points[below]!)
}
const slope = (tone: number) => Math.max(...[-1, 0, 1].map((step) => {
  const i = Math.min(1023, Math.max(0, Math.floor(tone * 1024) + step))
  return 1024 * (points[i + 1]! - points[i]!)
}))

const lightnessOfGrey = (encoded: number) => new Color('srgb', [encoded, encoded, encoded]).to('lab').coords[0]

describe.each([8, 16] as const)('a %i-bit grey ramp through a known curve', (bitDepth) => {
  const width = bitDepth === 8 ? 256 : 2048, height = 4
  const greatest = 2 ** bitDepth - 1
  const encoded = Array.from({ length: width }, (_, x) => Math.round(greatest * x / (width - 1)))
  const samples = Array.from({ length: height }, () => encoded).flat()
  const path = bench.keep(pngFile({ width, height, bitDepth, channels: 1, samples }))
  const order = filmOrder(width, height, { mirror: true, tone: { adjustments: neutral, aim: 'even-lightness', response } })

  it('gives round(65535 · (1 − n)) of the tone plane within 1 code, mirrored, read back by libvips and ImageMagick', async () => {
    const { target } = await bench.film(path, order)
    const read = bench.vipsSamples(target)
    expect(read).toHaveLength(width * height)
    expect(bench.magickSamples(target)).toEqual(read)
    for (let x = 0; x < width; x++) {
      const plane = Math.round(65535 * lightnessOfGrey(encoded[x]! / greatest)! / 100)
      const code = read[width + width - 1 - x]!
      expect(Math.abs(code - Math.round(65535 * (1 - level(plane / 65535)))), `ramp value ${encoded[x]}`).toBeLessThanOrEqual(1)
    }
  })

  it('stays within half a plane step times the slope of the calculation without rounding', async () => {
    const read = bench.vipsSamples((await bench.film(path, order)).target)
    for (let x = 0; x < width; x++) {
      const tone = lightnessOfGrey(encoded[x]! / greatest)! / 100
      // half a step of the plane, half a step of the film's own rounding, and the library's float error
      const allowed = 0.5 * slope(tone) + 0.5 + 0.02
      expect(Math.abs(read[width - 1 - x]! - 65535 * (1 - level(tone))), `ramp value ${encoded[x]}`).toBeLessThanOrEqual(allowed)
    }
  })
})

describe('ink of another colour than black', () => {
  it('is written as three channels, each 65535 · (1 − level · (1 − c/255))', async () => {
    const encoded = [0, 40, 90, 128, 200, 255]
    const path = bench.keep(pngFile({ width: 6, height: 1, bitDepth: 8, channels: 1, samples: encoded }))
    const { target } = await bench.film(path, filmOrder(6, 1, { inkColor: '#cc3300', tone: { adjustments: neutral, aim: 'even-lightness', response } }))
    const read = bench.magickSamples(target, 'rgb')
    encoded.forEach((value, x) => [0xCC, 0x33, 0x00].forEach((c, channel) => {
      const plane = Math.round(65535 * lightnessOfGrey(value / 255)! / 100)
      expect(Math.abs(read[3 * x + channel]! - 65535 * (1 - level(plane / 65535) * (1 - c / 255)))).toBeLessThanOrEqual(1)
    }))
  })
})
