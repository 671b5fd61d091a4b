// Proxy, thumbnail and forecast. Expected values: colorjs.io for the working space (ProPhoto's primaries) and for L*; libvips reads the files.
import { readFileSync } from 'node:fs'
import Color from 'colorjs.io'
import sharp from 'sharp'
import { describe, expect, it } from 'vitest'
import { mixToTonePlane, mixWeights } from '../../../shared/tone/mix'
import { statePixels } from '../../../shared/tone/triptych'
import { makeForecast } from '../../../server/image/work/forecast'
import { makeProxy } from '../../../server/image/work/proxy'
import { makeThumbnail } from '../../../server/image/work/thumbnail'
import { matrixProfile, srgbCurve } from '../../support/pictures/profiles'
import { pngFile } from '../../support/pictures/png-file'
import { filmOrder, neutral, openWorkbench, tonesFrom, wholePicture } from '../../support/pictures/workbench'

const bench = openWorkbench()
const geometry = wholePicture
async function proxyOf(path: string, width: number, height: number, changes: Partial<typeof geometry> = {}) {
  const target = bench.fresh('proxy')
  await makeProxy({ path, target, geometry: { ...geometry, ...changes }, width, height })
  const bytes = readFileSync(target)
  return new Uint16Array(bytes.buffer.slice(bytes.byteOffset, bytes.byteOffset + bytes.length))
}

/** A colourful picture with fine structure, tagged Display P3, stored lying on its side. */
const side = { width: 331, height: 222 }
const scene = bench.keep(pngFile({
  ...side, bitDepth: 8, channels: 3, orientation: 6, icc: matrixProfile('p3', srgbCurve()),
  samples: Array.from({ length: side.width * side.height }, (_, i) => {
    const x = i % side.width, y = Math.floor(i / side.width)
    return [(x * 5 + y) % 256, Math.round(127 + 127 * Math.sin(x * y / 900)), (x + y) % 3 === 0 ? 250 : y % 256]
  }).flat(),
}))
const response = Array.from({ length: 1025 }, (_, i) => 15 + 80 * (i / 1024) ** 0.7)
const tone = { adjustments: { ...neutral, mix: { red: 2, green: 0.5, blue: -0.5 }, contrast: 0.3, midtone: 0.2 }, aim: 'keep-middle-tones', response } as const

describe('the proxy', () => {
  it('holds L*-coded linear working-space channels, little-endian, wide gamut unclipped', async () => {
    const colours = [[255, 128, 0], [255, 0, 0], [0, 255, 0], [0, 0, 255], [30, 60, 90], [255, 255, 255], [0, 0, 0]]
    const path = bench.keep(pngFile({ width: colours.length, height: 1, bitDepth: 8, channels: 3, samples: colours.flat(), icc: matrixProfile('p3', srgbCurve()) }))
    const channels = await proxyOf(path, colours.length, 1)
    const code = (y: number) => 655.35 * (y > 216 / 24389 ? 116 * Math.cbrt(y) - 16 : y * 24389 / 27) // CIE 15:2004, 8.2.1.1
    colours.forEach((colour, i) => {
      const linear = new Color('p3', colour.map(v => v / 255) as [number, number, number]).to('prophoto-linear').coords
      // half an L* thousandth of full scale: the library's primaries are rounded elsewhere
      linear.forEach((value, c) => expect(Math.abs(channels[3 * i + c]! - code(Math.max(0, value!))), `${colour} channel ${c}`).toBeLessThan(30))
    })
  })

  it('mixed to tones is what the film holds at the same reduced pixels, within 2 codes', async () => {
    const [width, height] = [97, 145]
    const plane = new Uint16Array(width * height)
    mixToTonePlane(await proxyOf(scene, width, height), mixWeights(neutral.mix), plane)
    const { target } = await bench.film(scene, filmOrder(width, height))
    const film = tonesFrom(bench.vipsSamples(target))
    const worst = plane.reduce((most, code, i) => Math.max(most, Math.abs(code - film[i]!)), 0)
    expect(worst).toBeLessThanOrEqual(2)
  })

  it('of a region is that part of the picture', async () => {
    const whole = await proxyOf(scene, side.height, side.width)
    const part = await proxyOf(scene, 111, 331, { crop: { x: 0.5, y: 0, width: 0.5, height: 1 } })
    for (const y of [0, 100, 330]) {
      expect(part.slice(3 * 111 * y, 3 * 111 * (y + 1))).toEqual(whole.slice(3 * (222 * y + 111), 3 * 222 * (y + 1)))
    }
  })
})

describe('the forecast', () => {
  it.each(['photo', 'film', 'print'] as const)('is what the page computes from the proxy by shared functions, within 1 of 255 (%s)', async (state) => {
    // derived: the bounding rectangle of 222 × 331 turned by 3° is 239.0 × 342.2, of which 0.8 a side is taken
    const order = { ...filmOrder(1500, 2147), tone, mirror: true, geometry: { ...geometry, straightenDegrees: 3, crop: { x: 0.1, y: 0.1, width: 0.8, height: 0.8 } } }
    const target = bench.fresh('forecast.png')
    const { width, height } = await makeForecast({ path: scene, target, order, width: 90, state, palette: 'cyanotype' })
    expect([width, height]).toEqual([90, 129])
    const { data, info } = await sharp(target).raw().toBuffer({ resolveWithObject: true })
    expect(info).toMatchObject({ width, height, channels: 3 })
    const plane = new Uint16Array(width * height)
    mixToTonePlane(await proxyOf(scene, width, height, order.geometry), mixWeights(tone.adjustments.mix), plane)
    const table = statePixels(state, tone, 'cyanotype')
    let worst = 0
    for (let i = 0; i < plane.length; i++) {
      const x = i % width, at = state === 'film' ? i - x + width - 1 - x : i
      const pixel = table[plane[i]!]!
      for (let c = 0; c < 3; c++) worst = Math.max(worst, Math.abs(data[3 * at + c]! - ((pixel >> (8 * c)) & 255)))
    }
    expect(worst).toBeLessThanOrEqual(1)
  })

  it('of the print agrees with the film file of the same pixels through the response', async () => {
    const order = { ...filmOrder(90, 134), tone: { ...tone, adjustments: { ...tone.adjustments, mix: neutral.mix } }, geometry: { ...geometry, crop: { x: 0, y: 0, width: 1, height: 1 } } }
    const target = bench.fresh('forecast.png')
    await makeForecast({ path: scene, target, order, width: 90, state: 'print', palette: 'photo' })
    const shown = await sharp(target).raw().toBuffer()
    const film = bench.vipsSamples((await bench.film(scene, order)).target)
    film.forEach((code, i) => {
      const place = (1 - code / 65535) * 1024, below = Math.min(1023, Math.floor(place))
      const lightness = response[below]! + (place - below) * (response[below + 1]! - response[below]!)
      const grey = new Color('lab', [lightness, 0, 0]).to('srgb').coords[0]! * 255
      expect(Math.abs(shown[3 * i]! - grey), `pixel ${i}`).toBeLessThanOrEqual(1)
    })
  })

  it('shows a contained picture’s sides as its margin will print', async () => {
    const order = { ...filmOrder(400, 400), tone, margin: { pixels: 0, kind: 'opaque' as const } }
    const target = bench.fresh('forecast.png')
    await makeForecast({ path: scene, target, order, width: 80, state: 'print', palette: 'photo' })
    const shown = await sharp(target).raw().toBuffer()
    const paper = Math.round(new Color('lab', [95, 0, 0]).to('srgb').coords[0]! * 255)
    expect([shown[0], shown[3 * (80 * 40 + 2)], shown[3 * (80 * 40 + 77)]]).toEqual([paper, paper, paper])
  })

  it('is amber without any blue in the dim room', async () => {
    const target = bench.fresh('forecast.png')
    await makeForecast({ path: scene, target, order: { ...filmOrder(300, 448), tone }, width: 60, state: 'print', palette: 'dim' })
    const shown = await sharp(target).raw().toBuffer()
    expect(shown.filter((_, i) => i % 3 === 2).every(blue => blue === 0)).toBe(true)
    expect(shown.some(value => value > 100)).toBe(true)
  })
})

describe('the thumbnail', () => {
  it('is an upright black-and-white JPEG of at most the longer side', async () => {
    const target = bench.fresh('thumbnail.jpg')
    expect(await makeThumbnail({ path: scene, target, longerSide: 100 })).toEqual({ width: 67, height: 100 })
    expect(await sharp(target).metadata()).toMatchObject({ format: 'jpeg', width: 67, height: 100, channels: 1 })
    const small = bench.keep(pngFile({ width: 9, height: 4, bitDepth: 8, channels: 1, samples: new Uint8Array(36).fill(128) }))
    expect(await makeThumbnail({ path: small, target: bench.fresh('thumbnail.jpg'), longerSide: 480 })).toEqual({ width: 9, height: 4 })
  })

  it('has the picture’s own luminance', async () => {
    const path = bench.keep(pngFile({ width: 16, height: 16, bitDepth: 8, channels: 3, samples: Array.from({ length: 256 }, () => [230, 120, 40]).flat(), icc: matrixProfile('p3', srgbCurve()) }))
    const target = bench.fresh('thumbnail.jpg')
    await makeThumbnail({ path, target, longerSide: 16 })
    const [grey] = await sharp(target).raw().toBuffer()
    const lightness = new Color('p3', [230 / 255, 120 / 255, 40 / 255]).to('lab').coords[0]!
    expect(Math.abs(grey! - 255 * new Color('lab', [lightness, 0, 0]).to('srgb').coords[0]!)).toBeLessThanOrEqual(1)
  })
})
