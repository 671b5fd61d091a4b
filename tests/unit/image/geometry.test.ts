// Expected pictures: sharp's own autoOrient, rotate and extract (libvips), a library that shares no code with the engine's sampling.
import sharp from 'sharp'
import { describe, expect, it } from 'vitest'
import type { Geometry } from '../../../server/image/protocol'
import { exifOrientation, pngFile } from '../../support/pictures/png-file'
import { filmOrder, openWorkbench, tonesFrom, wholePicture } from '../../support/pictures/workbench'

const bench = openWorkbench()
const width = 23, height = 14
/** Scattered greys without any symmetry; a linear congruential generator with a fixed seed. */
const noise = (count: number) => {
  let state = 12345
  return Uint8Array.from({ length: count }, () => (state = (state * 1103515245 + 12345) % 2 ** 31) >> 16)
}
const greys = noise(width * height)

async function tonesOf(path: string, w: number, h: number, geometry: Partial<Geometry> = {}) {
  const { target } = await bench.film(path, filmOrder(w, h, { geometry: { ...wholePicture, ...geometry } }))
  return tonesFrom(bench.vipsSamples(target))
}
/** Tone code of each 8-bit grey, as the engine gives it for a plain picture: the oracle moves greys, not tones. */
const toneOfGrey = await tonesOf(bench.keep(pngFile({ width: 256, height: 1, bitDepth: 8, channels: 1, samples: Uint8Array.from({ length: 256 }, (_, i) => i) })), 256, 1)
const asTones = (pixels: Uint8Array) => Uint16Array.from(pixels, grey => toneOfGrey[grey]!)

describe.each([1, 2, 3, 4, 5, 6, 7, 8])('a picture with orientation %i', (orientation) => {
  const swapped = orientation >= 5
  const [w, h] = swapped ? [height, width] : [width, height]

  it('in a PNG comes out upright, bit for bit', async () => {
    const file = pngFile({ width, height, bitDepth: 8, channels: 1, samples: greys, orientation })
    const upright = await sharp(file).autoOrient().toColourspace('b-w').raw().toBuffer()
    expect(await tonesOf(bench.keep(file), w, h)).toEqual(asTones(upright))
  })

  it('in a JPEG comes out upright, bit for bit, also when enlarged and then mirrored', async () => {
    const plain = await sharp(greys, { raw: { width, height, channels: 1 } }).toColourspace('b-w').jpeg({ quality: 90 }).toBuffer()
    const exif = Buffer.concat([Buffer.from([0xFF, 0xE1, 0, 34]), Buffer.from('Exif\0\0', 'latin1'), exifOrientation(orientation, 'II')])
    const file = Buffer.concat([plain.subarray(0, 2), exif, plain.subarray(2)])
    const path = bench.keep(file)
    const pixels = await sharp(file, { ignoreIcc: true }).autoOrient().toColourspace('b-w').raw().toBuffer()
    expect(await tonesOf(path, w, h)).toEqual(asTones(pixels))
    const upright = await sharp(pixels, { raw: { width: w, height: h, channels: 1 } }).toColourspace('b-w').png().toBuffer()
    const enlarged = await tonesOf(bench.keep(upright), 3 * w, 2 * h)
    expect(await tonesOf(path, 3 * w, 2 * h)).toEqual(enlarged)
    const reduced = await tonesOf(bench.keep(upright), 5, 4)
    expect(await tonesOf(path, 5, 4)).toEqual(reduced)
  })
})

describe('quarter turns', () => {
  it.each([1, 2, 3])('turn clockwise (%i), after the orientation', async (quarterTurns) => {
    const file = pngFile({ width, height, bitDepth: 8, channels: 1, samples: greys, orientation: 7 })
    const { data, info } = await sharp(await sharp(file).autoOrient().png().toBuffer()).rotate(90 * quarterTurns).toColourspace('b-w').raw().toBuffer({ resolveWithObject: true })
    expect(await tonesOf(bench.keep(file), info.width, info.height, { quarterTurns })).toEqual(asTones(data))
  })
})

describe('the crop', () => {
  it('is in fractions of the turned picture and exact to the pixel', async () => {
    const file = pngFile({ width: 20, height: 10, bitDepth: 8, channels: 1, samples: greys.subarray(0, 200) })
    const turned = await sharp(file).rotate(90).toBuffer()
    const part = await sharp(turned).extract({ left: 2, top: 5, width: 5, height: 10 }).toColourspace('b-w').raw().toBuffer()
    const tones = await tonesOf(bench.keep(file), 5, 10, { quarterTurns: 1, crop: { x: 0.2, y: 0.25, width: 0.5, height: 0.5 } })
    expect(tones).toEqual(asTones(part))
  })
})

describe('straightening', () => {
  const side = 200
  /** White with a black bar 10 px high across the middle. */
  const bar = pngFile({ width: side, height: side, bitDepth: 8, channels: 1, samples: Array.from({ length: side * side }, (_, i) => Math.abs(Math.floor(i / side) - 99.5) < 5 ? 0 : 255) })
  const path = bench.keep(bar)
  const frame = side * (Math.cos(Math.PI / 18) + Math.sin(Math.PI / 18))
  const darkCentre = (tones: Uint16Array, w: number, h: number, x: number) => {
    let sum = 0, weight = 0
    for (let y = 0; y < h; y++) {
      const dark = 65535 - tones[y * w + x]!
      sum += dark * (y + 0.5)
      weight += dark
    }
    return sum / weight
  }

  it.each([['enlarged', 2], ['reduced', 0.5], ['far reduced', 0.15]])('turns clockwise when positive, about the centre, within the bounding rectangle (%s)', async (_, scale) => {
    const size = Math.round(frame * scale)
    const tones = await tonesOf(path, size, size, { straightenDegrees: 10 })
    const pitch = frame / size
    // derived: the bar's centre line passes the middle and falls to the right by tan 10°
    for (const offset of [-60, 0, 60]) {
      const column = Math.floor((frame / 2 + offset) / pitch)
      const y = darkCentre(tones, size, size, column) * pitch
      expect(Math.abs(y - (frame / 2 + ((column + 0.5) * pitch - frame / 2) * Math.tan(Math.PI / 18)))).toBeLessThan(0.35)
    }
  })

  it('fills what lies outside the picture with paper white', async () => {
    const black = bench.keep(pngFile({ width: side, height: side, bitDepth: 8, channels: 1, samples: new Uint8Array(side * side) }))
    for (const size of [300, 60]) {
      const tones = await tonesOf(black, size, size, { straightenDegrees: -20 })
      expect([tones[0], tones[size - 1], tones.at(-1), tones[size * (size >> 1) + (size >> 1)]]).toEqual([65535, 65535, 65535, 0])
    }
  })

  it('agrees with libvips’ rotation away from edges', async () => {
    const smooth = Uint8Array.from({ length: side * side }, (_, i) => Math.round(127 + 60 * Math.sin((i % side) / 17) + 60 * Math.cos(Math.floor(i / side) / 23)))
    const file = pngFile({ width: side, height: side, bitDepth: 8, channels: 1, samples: smooth })
    const { data, info } = await sharp(file).rotate(7, { background: '#fff' }).toColourspace('b-w').raw().toBuffer({ resolveWithObject: true })
    const exact = side * (Math.cos(7 * Math.PI / 180) + Math.sin(7 * Math.PI / 180))
    // the library's canvas is whole pixels: the same canvas in our frame, about the same centre
    const crop = { x: 0.5 - info.width / exact / 2, y: 0.5 - info.height / exact / 2, width: info.width / exact, height: info.height / exact }
    const shrunk = { x: Math.max(0, crop.x), y: Math.max(0, crop.y), width: crop.width, height: crop.height }
    const tones = await tonesOf(bench.keep(file), info.width, info.height, { straightenDegrees: 7, crop: shrunk })
    for (let y = 60; y < info.height - 60; y += 7) {
      for (let x = 60; x < info.width - 60; x += 7) {
        const wanted = toneOfGrey[data[y * info.width + x]!]!
        expect(Math.abs(tones[y * info.width + x]! - wanted), `${x}, ${y}`).toBeLessThan(65535 * 0.012)
      }
    }
  })
})
