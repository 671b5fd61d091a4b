// Scans as files. Written by libvips and by Debian's heif-enc; expected values: colorjs.io for colours, the files' own writers for their facts.
import { execFileSync } from 'node:child_process'
import Color from 'colorjs.io'
import sharp from 'sharp'
import { describe, expect, it } from 'vitest'
import { labFromXyz } from '../../../shared/tone/lab'
import { transform } from '../../../shared/tone/matrix'
import { requireWithinBudget } from '../../../server/image/header/budget'
import { readPictureHeader } from '../../../server/image/header/read-header'
import { decodeScan } from '../../../server/image/scan/decode-scan'
import { adobeCurve, gamma, greyProfile, matrixProfile, sampled } from '../../support/pictures/profiles'
import { openWorkbench } from '../../support/pictures/workbench'

const bench = openWorkbench()
const [width, height] = [48, 32]
const colours = [[200, 120, 40], [20, 60, 160], [128, 128, 128], [250, 248, 240]] as const
/** Four upright stripes, even within each. */
const stripes = () => Buffer.from(Array.from({ length: width * height }, (_, i) => colours[Math.floor(i % width / 12)]!).flat())
const picture = () => sharp(stripes(), { raw: { width, height, channels: 3 } })
const picture16 = () => sharp(Uint16Array.from(stripes(), code => 257 * code), { raw: { width, height, channels: 3 } }).toColourspace('rgb16')
const header = readPictureHeader

function heicFile(png: Buffer): string {
  const target = bench.fresh('scan.heic')
  execFileSync('heif-enc', ['-L', '-p', 'chroma=444', '-o', target, bench.keep(png, 'scan.png')], { stdio: 'ignore' })
  return target
}

/** L*a*b* of the middle of each stripe. */
async function stripeLabs(path: string) {
  const { picture: { codes, channels, width: across, height: down, colour: { linear, xyz } } } = await decodeScan({ path })
  expect([across, down]).toEqual([width, height])
  return colours.map((_, i) => {
    const at = (16 * width + 12 * i + 6) * channels
    const light = channels === 1 ? [0, 0, 0].map(() => linear[codes[at]!]!) : [0, 1, 2].map(c => linear[codes[at + c]!]!)
    return labFromXyz(transform(xyz, channels === 1 ? [light[0]!, 0, 0] : light as [number, number, number]))
  })
}
const expected = (space: 'srgb' | 'a98rgb') => colours.map(colour => new Color(space, colour.map(v => v / 255) as [number, number, number]).to('lab').coords)

function expectLabs(labs: readonly (readonly number[])[], wanted: (number | null)[][], within: number) {
  labs.forEach((lab, i) => lab.forEach((value, k) => expect(Math.abs(value - wanted[i]![k]!), `stripe ${i}, value ${k}`).toBeLessThan(within)))
}

describe('headers', () => {
  it.each([
    ['striped LZW', () => picture().tiff({ compression: 'lzw' }), { bitDepth: 8, colour: 'rgb', alpha: false }],
    ['tiled deflate of 16 bits', () => picture().toColourspace('rgb16').tiff({ compression: 'deflate', tile: true, tileWidth: 16, tileHeight: 16 }), { bitDepth: 16, colour: 'rgb', alpha: false }],
    ['grey', () => picture().toColourspace('b-w').tiff({ compression: 'none' }), { bitDepth: 8, colour: 'grey', alpha: false }],
    ['with alpha', () => picture().ensureAlpha().tiff({ compression: 'lzw' }), { bitDepth: 8, colour: 'rgb', alpha: true }],
    ['with an orientation', () => picture().withMetadata({ orientation: 6 }).tiff(), { orientation: 6 }],
    ['with a profile', () => picture().withIccProfile('p3').tiff(), { colour: 'rgb' }],
  ])('of TIFF files are read: %s', async (_, write, facts) => {
    const read = await header(bench.keep(await write().toBuffer()))
    expect(read).toMatchObject({ format: 'tiff', width, height, device: null, ...facts })
    if (_ === 'with a profile') expect(read.icc!.toString('latin1', 36, 40)).toBe('acsp')
  })

  it('of a big-endian TIFF are read', async () => {
    const target = bench.fresh('big.tif')
    execFileSync('convert', [bench.keep(await picture().png().toBuffer(), 'a.png'), '-endian', 'MSB', target])
    expect(await header(target)).toMatchObject({ format: 'tiff', width, height, bitDepth: 8 })
  })

  it('of HEIC files are read, and the pixel budget is asked before anything is decoded', async () => {
    const read = await header(heicFile(await picture().png().toBuffer()))
    expect(read).toMatchObject({ format: 'heic', width, height, orientation: 1, device: 'camera' })
    expect(() => requireWithinBudget({ ...read, width: 9000, height: 7000 })).toThrow('a HEIC picture may have 50 million')
    expect(() => requireWithinBudget({ ...read, format: 'tiff', progressive: false, width: 20_000, height: 13_000 })).toThrow('8-bit TIFF may have 250 million')
  })

  it('tell a camera’s picture by the notes on its lens', async () => {
    const jpeg = await picture().withExif({ IFD2: { FNumber: '18/10', FocalLength: '42/10' } }).jpeg().toBuffer()
    const scanned = await picture().withExif({ IFD0: { Make: 'Rope Works', Model: 'Flatbed' } }).jpeg().toBuffer()
    expect([(await header(bench.keep(jpeg))).device, (await header(bench.keep(scanned))).device]).toEqual(['camera', null])
  })

  it('that are broken are refused', async () => {
    const tiff = await picture().tiff().toBuffer()
    for (const length of [8, 9, 30]) await expect(header(bench.keep(tiff.subarray(0, length)))).rejects.toMatchObject({ code: 'image_unreadable' })
    await expect(header(bench.keep(Buffer.from('no picture')))).rejects.toMatchObject({ code: 'not_an_image', message: expect.stringContaining('JPEG, PNG, TIFF, WebP, AVIF, or HEIC') })
  })
})

describe('a scan', () => {
  it.each([
    ['PNG', () => picture().png().toBuffer(), 0.01], ['LZW TIFF', () => picture().tiff({ compression: 'lzw' }).toBuffer(), 0.01],
    ['16-bit tiled TIFF', () => picture16().tiff({ compression: 'deflate', tile: true, tileWidth: 16, tileHeight: 16 }).toBuffer(), 0.01],
    ['JPEG', () => picture().jpeg({ quality: 100, chromaSubsampling: '4:4:4' }).toBuffer(), 1.5],
  ])('has the same colours as %s', async (_, write, within) => {
    expectLabs(await stripeLabs(bench.keep(await write())), expected('srgb'), within)
  })

  it('has the same colours as HEIC', async () => {
    expectLabs(await stripeLabs(heicFile(await picture().png().toBuffer())), expected('srgb'), 1.5)
  })

  it('is read by its own profile: Adobe RGB’s matrix and curve', async () => {
    const tagged = bench.fresh('adobe.tif')
    execFileSync('convert', [bench.keep(await picture().png().toBuffer(), 'a.png'), '+profile', 'icc', '-profile', bench.keep(matrixProfile('a98rgb', adobeCurve()), 'adobe.icc'), tagged])
    expectLabs(await stripeLabs(tagged), expected('a98rgb'), 0.05)
  })

  it('in grey is read by its grey profile', async () => {
    const tagged = bench.fresh('grey.tif')
    execFileSync('convert', [bench.keep(await picture().toColourspace('b-w').png().toBuffer(), 'g.png'), '-profile', bench.keep(greyProfile(gamma(1.8)), 'grey.icc'), tagged])
    const { data } = await picture().toColourspace('b-w').raw().toBuffer({ resolveWithObject: true })
    const labs = await stripeLabs(tagged)
    colours.forEach((_, i) => {
      // CIE 1976 L* of the code to the power 1.8 (profile), by colorjs.io.
      const y = (data[16 * width + 12 * i + 6]! / 255) ** (Math.round(1.8 * 256) / 256)
      expect(labs[i]![0]).toBeCloseTo(new Color('xyz-d50', [0.9642 * y, y, 0.8249 * y]).to('lab').coords[0]!, 1)
    })
  })

  it('whose profile has a curve for each channel is coded anew without loss', async () => {
    const curves = [1, 0.5, 2].map(power => sampled(Array.from({ length: 256 }, (_, i) => (i / 255) ** power)))
    const { pictureColour } = await import('../../../server/image/scan/picture-colour')
    const { readProfile } = await import('../../../server/image/colour/icc-profile')
    const { workingLightOf } = await import('../../../server/image/colour/working-light')
    const icc = matrixProfile('srgb', curves[0]!)
    const light = workingLightOf(readProfile(icc) as never)
    const powers = [1, 0.5, 2]
    const { codes, colour } = pictureColour(Uint8Array.from([10, 100, 200]), 3, { ...light, curves: powers.map(p => (x: number) => x ** p) })
    expect(codes).toBeInstanceOf(Uint16Array)
    powers.forEach((power, c) => expect(colour.linear[codes[c]!]).toBeCloseTo(([10, 100, 200][c]! / 255) ** power, 4))
  })

  it('is turned upright as its file says', async () => {
    const { picture: turned } = await decodeScan({ path: bench.keep(await picture().withMetadata({ orientation: 6 }).tiff().toBuffer()) })
    expect([turned.width, turned.height]).toEqual([height, width])
  })

  it('that is cut off is refused', async () => {
    for (const bytes of [await picture().png({ compressionLevel: 0 }).toBuffer(), await picture().jpeg().toBuffer()]) {
      await expect(decodeScan({ path: bench.keep(bytes.subarray(0, bytes.length - 200)) })).rejects.toMatchObject({ code: 'image_unreadable' })
    }
  })
})
