import { execFileSync } from 'node:child_process'
import { openSync, readdirSync, readFileSync, writeSync, closeSync, ftruncateSync } from 'node:fs'
import sharp from 'sharp'
import { describe, expect, it } from 'vitest'
import { requireWithinBudget } from '../../../server/image/header/budget'
import { readPictureHeader } from '../../../server/image/header/read-header'
import { probePicture } from '../../../server/image/work/probe'
import { adobeCurve, greyProfile, matrixProfile, srgbCurve } from '../../support/pictures/profiles'
import { exifOrientation, pngChunk, pngFile, pngHeader, pngSignature } from '../../support/pictures/png-file'
import { openWorkbench } from '../../support/pictures/workbench'

const bench = openWorkbench()
const probe = (bytes: Buffer, name?: string) => probePicture({ path: bench.keep(bytes, name) })
const coded = (code: string) => expect.objectContaining({ code, message: expect.stringMatching(/\.$/) })

const grey = { width: 64, height: 48, bitDepth: 8, channels: 1, samples: Uint8Array.from({ length: 64 * 48 }, (_, i) => (i * 97) % 251) } as const
const photo = await sharp({ create: { width: 400, height: 300, channels: 3, background: '#a63' } })
  .composite([{ input: await sharp(Buffer.from(Uint8Array.from({ length: 120_000 }, (_, i) => (i * i) % 253)), { raw: { width: 400, height: 300, channels: 1 } }).png().toBuffer(), blend: 'multiply' }])
  .jpeg({ quality: 90 }).toBuffer()
const progressive = await sharp(photo).jpeg({ quality: 90, progressive: true }).toBuffer()
const withSegment = (jpeg: Buffer, marker: number, body: Buffer) => {
  const head = Buffer.from([0xFF, marker, 0, 0])
  head.writeUInt16BE(body.length + 2, 2)
  return Buffer.concat([jpeg.subarray(0, 2), head, body, jpeg.subarray(2)])
}

describe('a sound picture', () => {
  it('is known by its content, whatever its name', async () => {
    expect(await probe(photo, 'holiday.png')).toEqual({ format: 'jpeg', width: 400, height: 300, orientation: 1, bitDepth: 8, colourProfile: 'sRGB, no profile', notes: [] })
    expect(await probe(pngFile({ ...grey, icc: greyProfile(adobeCurve(), 'Rope works grey') }), 'scan.jpg'))
      .toEqual({ format: 'png', width: 64, height: 48, orientation: 1, bitDepth: 8, colourProfile: 'Rope works grey', notes: [] })
    expect(await probe(pngFile({ ...grey, bitDepth: 16, icc: matrixProfile('p3', srgbCurve(), 'Wide phone') }))).toMatchObject({ bitDepth: 16, colourProfile: 'Wide phone' })
  })

  it.each(['II', 'MM'] as const)('says its upright sides and orientation (%s byte order)', async (order) => {
    const turned = withSegment(photo, 0xE1, Buffer.concat([Buffer.from('Exif\0\0', 'latin1'), exifOrientation(6, order)]))
    expect(await probe(turned)).toMatchObject({ width: 300, height: 400, orientation: 6 })
  })

  it('may have broken Exif or an orientation that does not exist', async () => {
    expect(await probe(withSegment(photo, 0xE1, Buffer.from('Exif\0\0MM\0\x2A\xFF\xFF\xFF\xFF', 'latin1')))).toMatchObject({ orientation: 1 })
    expect(await probe(pngFile({ ...grey, orientation: 9 }))).toMatchObject({ orientation: 1 })
  })

  it('may be progressive, CMYK, or carry a profile in pieces', async () => {
    expect(await readPictureHeader(bench.keep(progressive))).toMatchObject({ progressive: true, colour: 'rgb' })
    expect(await probe(await sharp(photo).toColourspace('cmyk').jpeg().toBuffer())).toMatchObject({ format: 'jpeg', width: 400 })
    const icc = matrixProfile('p3', srgbCurve(), 'In two pieces')
    const piece = (number: number, bytes: Buffer) => Buffer.concat([Buffer.from(`ICC_PROFILE\0`, 'latin1'), Buffer.from([number, 2]), bytes])
    const pieces = withSegment(withSegment(photo, 0xE2, piece(2, icc.subarray(100))), 0xE2, piece(1, icc.subarray(0, 100)))
    expect(await probe(pieces)).toMatchObject({ colourProfile: 'In two pieces' })
  })

  it('is found in the PNG test suite as libvips finds it', async () => {
    const folder = '/usr/share/libjxl-testdata/external/pngsuite'
    const files = readdirSync(folder).filter(name => name.endsWith('.png'))
    expect(files.length).toBeGreaterThan(5)
    for (const name of files) {
      const path = `${folder}/${name}`
      const facts = await probePicture({ path })
      const size = execFileSync('vipsheader', ['-f', 'width', path], { encoding: 'utf8' })
      expect([name, facts.orientation >= 5 ? facts.height : facts.width]).toEqual([name, Number(size)])
    }
  })
})

describe('refused with a sentence and a code', () => {
  it.each([
    ['0 bytes', Buffer.alloc(0)],
    ['text', Buffer.from('<html>not a picture</html>')],
    ['a GIF', Buffer.from('GIF89a\x01\0\x01\0\0\0\0;', 'latin1')],
    ['two bytes of a JPEG', photo.subarray(0, 2)],
  ])('%s: not an image', async (_, bytes) => {
    await expect(probe(bytes)).rejects.toEqual(coded('not_an_image'))
  })

  it.each([
    ['a JPEG cut off in its header', photo.subarray(0, 40)],
    ['a JPEG cut off in the middle', photo.subarray(0, photo.length >> 1)],
    ['a JPEG without its last hundred bytes', photo.subarray(0, photo.length - 100)],
    ['a progressive JPEG cut off', progressive.subarray(0, Math.round(progressive.length * 0.8))],
    ['a PNG cut off in its header', pngFile(grey).subarray(0, 30)],
    ['a PNG cut off in its data', pngFile(grey).subarray(0, pngFile(grey).length - 60)],
    ['a PNG of no pixels', Buffer.concat([pngSignature, pngHeader(0, 5, 8, 0), pngChunk('IDAT'), pngChunk('IEND')])],
    ['a PNG of a depth that does not exist', Buffer.concat([pngSignature, pngHeader(5, 5, 7, 0), pngChunk('IDAT'), pngChunk('IEND')])],
    ['a PNG with no picture in it', Buffer.concat([pngSignature, pngHeader(5, 5, 8, 0), pngChunk('IEND')])],
    ['a PNG whose data is noise', Buffer.concat([pngSignature, pngHeader(50, 50, 8, 0), pngChunk('IDAT', Buffer.from('no deflate stream')), pngChunk('IEND')])],
    ['a JPEG with a broken segment length', Buffer.concat([photo.subarray(0, 4), Buffer.from([0, 1]), photo.subarray(6)])],
    ['a lossless JPEG', Buffer.from([0xFF, 0xD8, 0xFF, 0xC3, 0, 11, 8, 0, 9, 0, 9, 1, 1, 0x11, 0, 0xFF, 0xDA, 0, 2])],
  ])('%s: unreadable', async (_, bytes) => {
    await expect(probe(bytes)).rejects.toEqual(coded('image_unreadable'))
  })

  it('huge sides by the header alone, before anything is decoded', async () => {
    const started = performance.now()
    const bomb = (width: number, height: number, depth: number) => Buffer.concat([pngSignature, pngHeader(width, height, depth, 2), pngChunk('IDAT', Buffer.alloc(10)), pngChunk('IEND')])
    await expect(probe(bomb(50_000, 50_000, 8))).rejects.toEqual(coded('picture_too_large'))
    await expect(probe(bomb(2 ** 31 - 1, 2 ** 31 - 1, 16))).rejects.toEqual(coded('picture_too_large'))
    await expect(probe(bomb(12_500, 12_500, 16))).rejects.toThrow('a 16-bit PNG may have 150 million')
    expect(performance.now() - started).toBeLessThan(2000)
  })

  it('has its limit by kind: 250 million pixels where rows can stream, 150 where the picture must be held', () => {
    const header = { format: 'jpeg', width: 15_000, height: 15_000, orientation: 1, bitDepth: 8, colour: 'rgb', alpha: false, progressive: false, device: null, icc: null } as const
    expect(() => requireWithinBudget(header)).not.toThrow()
    expect(() => requireWithinBudget({ ...header, progressive: true })).toThrow('a progressive JPEG may have 150 million')
    expect(() => requireWithinBudget({ ...header, height: 17_000 })).toThrow('a JPEG may have 250 million')
    expect(() => requireWithinBudget({ ...header, format: 'png', bitDepth: 16, height: 10_001 })).toThrow('150 million')
  })

  it('a long chunk beside the picture costs no memory', async () => {
    // 900 MB of text chunk as a hole in the file: read it, and memory would show it
    const path = bench.fresh('long.png')
    const file = openSync(path, 'wx')
    const long = 900_000_000
    writeSync(file, Buffer.concat([pngSignature, pngHeader(5, 5, 8, 0)]))
    const head = Buffer.alloc(8)
    head.writeUInt32BE(long)
    head.write('tEXt', 4, 'latin1')
    writeSync(file, head)
    ftruncateSync(file, 33 + 12 + long)
    closeSync(file)
    const before = process.memoryUsage().rss
    await expect(probePicture({ path })).rejects.toEqual(coded('image_unreadable'))
    expect(process.memoryUsage().rss - before).toBeLessThan(50_000_000)
  })

  it('a small file that unpacks into a huge profile counts as one without', async () => {
    const { deflateSync } = await import('node:zlib')
    const huge = Buffer.concat([Buffer.from('p\0\0', 'latin1'), deflateSync(Buffer.alloc(40_000_000))])
    const plain = pngFile(grey)
    const header = await readPictureHeader(bench.keep(Buffer.concat([plain.subarray(0, 33), pngChunk('iCCP', huge), plain.subarray(33)])))
    expect(header.icc).toBeNull()
  })
})

describe('files with scattered wrong bytes', () => {
  it('end in one of the three refusals or in facts, never otherwise', async () => {
    const folder = '/usr/share/libjxl-testdata/external/pngsuite'
    const sound = readFileSync(`${folder}/${readdirSync(folder).find(name => name.endsWith('.png'))}`)
    for (let seed = 1; seed <= 60; seed++) {
      const bytes = Buffer.from(seed % 2 ? photo : sound)
      for (let i = 0; i < 4; i++) bytes[(seed * 7919 * (i + 1)) % Math.min(bytes.length, 700)] = (seed * 31 + i * 17) % 256
      const outcome = await probe(bytes).then(() => 'facts', (error: { code?: string }) => error.code)
      expect(['facts', 'not_an_image', 'image_unreadable', 'picture_too_large']).toContain(outcome)
    }
  })
})
