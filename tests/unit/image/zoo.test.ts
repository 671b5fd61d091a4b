// Independent decoders: ImageMagick 6 with Debian's libjpeg, libpng, libtiff, libwebp and lcms; heif-convert with Debian's libheif, libde265 and an
// AV1 decoder. The engine's are libvips' own builds and libheif in WebAssembly. Real pictures from Debian's packages, see server/cli/test.mjs.
import { execFileSync } from 'node:child_process'
import { existsSync, readFileSync } from 'node:fs'
import sharp from 'sharp'
import { afterAll, describe, expect, it } from 'vitest'
import { probePicture } from '../../../server/image/work/probe'
import { codedPictureOf, heifFile } from '../../support/pictures/heif-file'
import { difference, engineLightness, heifConvertLightness, icc, type LightnessPlane, magickLightness } from '../../support/pictures/independent'
import { matrixProfile, srgbCurve } from '../../support/pictures/profiles'
import { labOfInks, tableProfile } from '../../support/pictures/table-profile'
import { openWorkbench } from '../../support/pictures/workbench'

const bench = openWorkbench()
const table: string[] = []
afterAll(() => process.stdout.write(`\n${['file'.padEnd(62) + 'outcome'.padEnd(24) + 'max ΔL*  mean ΔL*', ...table].join('\n')}\n`))
const note = (file: string, outcome: string, figures?: { max: number, mean: number }) =>
  table.push(file.slice(-60).padEnd(62) + outcome.padEnd(24) + (figures ? `${figures.max.toFixed(3).padStart(7)}  ${figures.mean.toFixed(4).padStart(9)}` : ''))

/** Exact decoders differ by the rounding of the reference's 8-bit profiles and of its 16-bit L*. */
const exact = { max: 0.05, mean: 0.01 }

async function compare(name: string, path: string, reference: (path: string) => Promise<LightnessPlane>, tolerance: { max: number, mean: number }) {
  const [ours, theirs] = await Promise.all([engineLightness(path), reference(path)])
  const figures = difference(ours, theirs)
  note(name, `picture ${ours.width} × ${ours.height}`, figures)
  expect(figures.max, `${name}: greatest difference in L*`).toBeLessThanOrEqual(tolerance.max)
  expect(figures.mean, `${name}: mean difference in L*`).toBeLessThanOrEqual(tolerance.mean)
}

const [jxl, go, goImage, pixbuf] = ['/usr/share/libjxl-testdata', '/usr/share/go-1.19/src/image', '/usr/share/gocode/src/golang.org/x/image/testdata', '/usr/libexec/installed-tests/gdk-pixbuf']

describe('pictures of Debian’s packages are read as ImageMagick reads them', () => {
  it.each([
    [jxl, 'external/raw.pixls/', ['Google-Pixel2XL-16bit_acescg_g1_v4_krita.png', 'DJI-FC6310-16bit_srgb8_v4_krita.png', 'Nikon-D300-12bit_2020_g1_dt.png']],
    [jxl, 'external/wide-gamut-tests/', ['P3-sRGB-color-bars.png', 'R2020-sRGB-color-bars.png', 'rgb-to-gbr-test.png']],
    [jxl, 'jxl/flower/', ['flower_small.q85_420_non_interleaved.jpg', 'flower_small.q85_444_partially_interleaved.jpg']],
    [jxl, '', ['jxl/grayscale_patches.png', 'external/pngsuite/exif2c08.png', 'external/wesaturate/500px/tmshre_riaphotographs_alpha.png']],
    [go, 'testdata/', ['video-001.221212.jpeg', 'video-001.progressive.jpeg', 'video-001.q50.410.jpeg', 'video-001.q50.411.progressive.jpeg', 'video-001.q50.422.jpeg', 'video-001.q50.440.progressive.jpeg', 'video-001.rgb.jpeg', 'video-001.separate.dc.progression.progressive.jpeg', 'video-005.gray.q50.2x2.jpeg']],
    [go, 'png/testdata/', ['benchNRGBA-gradient.png', 'benchRGB-interlace.png', 'benchPaletted.png']],
    [go, 'png/testdata/pngsuite/', ['basn0g01-30.png', 'basn0g16.png', 'basn2c16.png', 'basn3p02.png', 'basn3p04-31i.png', 'basn3p08-trns.png', 'basn4a08.png', 'basn4a16.png', 'basn6a16.png']],
    [goImage, '', ['blue-purple-pink.lossless.webp', 'blue-purple-pink-large.normal-filter.lossy.webp', 'gopher-doc.4bpp.lossless.webp', 'yellow_rose.lossy-with-alpha.webp', 'bw-gopher_ccittGroup4.tiff', 'bw-packbits.tiff', 'blue-purple-pink.lzwcompressed.tiff', 'video-001-16bit.tiff', 'video-001-gray-16bit.tiff', 'video-001-paletted.tiff', 'video-001-strip-64.tiff', 'video-001-tile-64x64.tiff']],
    [pixbuf, '', ['bug725582-testrotate.jpg', 'dpi.tiff', 'icc-profile.jpeg', 'test-images/randomly-modified/valid.1.tiff']],
  ])('%s/%s', async (folder, below, names) => {
    expect(existsSync(folder), `${folder}: npm test installs its package`).toBe(true)
    for (const name of names) await compare(below + name, `${folder}/${below}${name}`, magickLightness, exact)
  })
})

describe('broken and hostile files of Debian’s packages are refused in words', () => {
  it.each<[path: string, code: string]>([
    [`${go}/png/testdata/invalid-crc32.png`, 'image_unreadable'], [`${go}/png/testdata/invalid-zlib.png`, 'image_unreadable'],
    [`${jxl}/jxl/hdr_room.png`, 'image_unreadable'],
    [`${pixbuf}/bug775218.jpg`, 'not_an_image'], [`${pixbuf}/premature-end.jpg`, 'image_unreadable'],
    [`${pixbuf}/issue205.jpg`, 'picture_too_large'], [`${pixbuf}/large.jpg`, 'picture_too_large'], [`${pixbuf}/large.png`, 'picture_too_large'],
    ...([['CVE-2017-2862.jpg', 'image_unreadable'], ['bug780269.tif', 'image_unreadable'], ['bug784903-overflow-dimensions.tiff', 'image_unreadable'], ['bug793470-crasher.png', 'picture_too_large'],
      ['invalid.1.png', 'image_unreadable'], ['invalid.2.png', 'image_unreadable'], ['invalid.3.png', 'image_unreadable'], ['invalid.4.png', 'image_unreadable']] as const).map(([name, code]) => [`${pixbuf}/test-images/fail/${name}`, code] as [string, string]),
    [`${pixbuf}/test-images/randomly-modified/bug775697.jpg`, 'image_unreadable'], [`${pixbuf}/test-images/reftests/bug696331.png`, 'image_unreadable'],
  ])('%s: %s', async (path, code) => {
    const refusal = await probePicture({ path }).then(() => ({ code: 'taken' }), (error: { code: string }) => error)
    note(path, refusal.code)
    expect(refusal).toMatchObject({ code, message: expect.stringMatching(/[a-z]{3}.*\.$/) })
  })
})

const scene = `${goImage}/video-001.png`
const p3 = bench.keep(matrixProfile('p3', srgbCurve(), 'Wide phone'), 'p3.icc')
/** A colourful scene in a file of another kind, written by ImageMagick. */
function made(name: string, ...options: string[]): string {
  const target = bench.fresh(name)
  execFileSync('convert', [scene, ...options, target], { timeout: 30_000 })
  return target
}
/** The same numbers meant as another space's colours. */
const asP3 = ['+profile', 'icc', '-profile', p3]

describe('made files are read as ImageMagick reads them', () => {
  it.each([1, 2, 3, 4, 5, 6, 7, 8])('a JPEG, TIFF and WebP of orientation %i', async (orientation) => {
    const upright = sharp(scene).withMetadata({ orientation })
    await compare(`orientation-${orientation}.jpg`, bench.keep(await upright.clone().jpeg({ quality: 95, chromaSubsampling: '4:4:4' }).toBuffer(), 'o.jpg'), magickLightness, exact)
    // The others keep the tag elsewhere; what it then means is the same.
    if (![2, 6, 7].includes(orientation)) return
    const tiff = bench.keep(await upright.clone().tiff({ compression: 'lzw' }).toBuffer(), 'o.tif')
    await compare(`orientation-${orientation}.tif`, tiff, magickLightness, exact)
    // ImageMagick 6 doesn't turn WebP: the reference is the turned TIFF.
    await compare(`orientation-${orientation}.webp`, bench.keep(await upright.clone().webp({ lossless: true }).toBuffer(), 'o.webp'), () => magickLightness(tiff), exact)
  })

  it.each([
    ['P3 as PNG', () => made('p3.png', ...asP3)], ['P3 as JPEG', () => made('p3.jpg', ...asP3, '-quality', '95')], ['P3 as WebP', () => made('p3.webp', ...asP3, '-define', 'webp:lossless=true')],
    ['P3 as 16-bit PNG', () => made('p3-16.png', '-resize', '150%', '-depth', '16', ...asP3)], ['P3 as 16-bit TIFF', () => made('p3-16.tif', '-resize', '150%', '-depth', '16', ...asP3)],
    ['Adobe RGB as JPEG', () => made('adobe.jpg', '+profile', 'icc', '-profile', icc.adobe)], ['Adobe RGB as TIFF', () => made('adobe.tif', '+profile', 'icc', '-profile', icc.adobe)],
    ['interlaced PNG', () => made('i.png', '-interlace', 'PNG')], ['palette PNG', () => made('palette.png', '-colors', '40', '-type', 'Palette')],
    ['big-endian TIFF', () => made('msb.tif', '-endian', 'MSB')], ['TIFF with white as 0', () => made('miniswhite.tif', '-colorspace', 'Gray', '-define', 'quantum:polarity=min-is-white')],
    ['TIFF in planes', () => made('planar.tif', '-interlace', 'plane')], ['TIFF coded as JPEG', () => made('j.tif', '-compress', 'JPEG', '-quality', '95')],
    ['progressive JPEG', () => made('progressive.jpg', '-interlace', 'JPEG')],
  ])('%s', async (name, make) => {
    await compare(name, make(), magickLightness, exact)
  })

  it('inks by their profile, beyond sRGB: CMYK as JPEG (inverted, by Adobe’s custom) and as TIFF', async () => {
    const profile = bench.keep(tableProfile('CMYK', 9, labOfInks), 'inks.icc')
    const steps = [0, 60, 128, 200, 255]
    const inks = bench.keep(Buffer.from(steps.flatMap(c => steps.flatMap(m => steps.flatMap(y => [0, 40, 160].flatMap(k => [c, m, y, k]))))), 'inks.raw')
    for (const [name, options] of [['inks.jpg', ['-quality', '100', '-sampling-factor', '1x1']], ['inks.tif', ['-compress', 'LZW']]] as const) {
      const target = bench.fresh(name)
      execFileSync('convert', ['-size', '75x5', '-depth', '8', `cmyk:${inks}`, '-profile', profile, ...options, target])
      // lcms' transforms of four channels are tetrahedral and precalculated; ours are linear in all of them.
      await compare(`CMYK with a profile, ${name}`, target, magickLightness, { max: 0.6, mean: 0.1 })
    }
    // Pure cyan is L* 95 · 0.58 by the table; clipped to sRGB it would lose more than one.
    const cyan = bench.fresh('cyan.tif')
    execFileSync('convert', ['-size', '8x8', '-depth', '8', 'xc:cmyk(255,0,0,0)', '-profile', profile, cyan])
    expect((await engineLightness(cyan)).lightness[0]).toBeCloseTo(95 * 0.58, 1)
  })

  it('inks without a profile: light where there is no ink, dark where there is much', async () => {
    const plain = made('plain-inks.jpg', '-colorspace', 'CMYK', '-quality', '95')
    expect(await probePicture({ path: plain })).toMatchObject({ colourProfile: expect.stringContaining('CMYK without a usable profile') })
    const figures = difference(await engineLightness(plain), await magickLightness(scene))
    note('CMYK without a profile, against the RGB it was made from', 'picture', figures)
    // There is no truth without a profile: a press is darker than ImageMagick's plain complement.
    expect(figures.mean).toBeLessThan(12)
    const inks = await probePicture({ path: `${go}/testdata/video-001.cmyk.jpeg` })
    expect(inks).toMatchObject({ width: 150, height: 103 })
    expect(difference(await engineLightness(`${go}/testdata/video-001.cmyk.jpeg`), await magickLightness(`${go}/testdata/video-001.cmyk.png`)).mean).toBeLessThan(12)
  })

  it('the first page of a TIFF of several, and the first frame of a moving WebP, and says so', async () => {
    const pages = bench.fresh('pages.tif')
    execFileSync('convert', [scene, `${goImage}/blue-purple-pink.png`, pages])
    await compare('TIFF of two pages', pages, magickLightness, exact)
    expect((await probePicture({ path: pages })).notes).toEqual(['several_pictures'])
    const moving = bench.fresh('moving.webp')
    await sharp([scene, made('other.png', '-negate')], { join: { animated: true } }).webp({ lossless: true, loop: 0 }).toFile(moving)
    await compare('WebP that moves', moving, () => magickLightness(scene), exact)
    expect((await probePicture({ path: moving })).notes).toEqual(['animation'])
  })

  it('the base picture of a JPEG with a gain map, the first of several pictures, and the still of a moving one, and says so', async () => {
    const base = readFileSync(made('base.jpg', '-quality', '92'))
    const segment = (marker: number, body: Buffer) => Buffer.concat([Buffer.from([0xFF, marker, (body.length + 2) >> 8, (body.length + 2) & 255]), body])
    const withSegments = (...segments: Buffer[]) => Buffer.concat([base.subarray(0, 2), ...segments, base.subarray(2)])
    const xmp = (text: string) => segment(0xE1, Buffer.from(`http://ns.adobe.com/xap/1.0/\0<x:xmpmeta xmlns:x="adobe:ns:meta/">${text}</x:xmpmeta>`))
    const several = segment(0xE2, Buffer.from('MPF\0II*\0\x08\0\0\0\0\0', 'latin1'))
    const [gainMap, film] = [await sharp({ create: { width: 38, height: 26, channels: 3, background: '#888' } }).jpeg().toBuffer(), Buffer.concat([Buffer.from('\0\0\0\x18ftypmp42', 'latin1'), Buffer.alloc(5000, 7)])]
    for (const [name, file, notes] of [
      ['Ultra HDR JPEG', [withSegments(xmp('hdrgm:Version="1.0"'), several), gainMap], ['gain_map']],
      ['gain map by ISO 21496-1', [withSegments(segment(0xE2, Buffer.from('urn:iso:std:iso:ts:21496:-1\0\0\0\0\0', 'latin1')), several), gainMap], ['gain_map']],
      ['multi-picture JPEG', [withSegments(several), base], ['several_pictures']],
      ['motion photo', [withSegments(xmp('GCamera:MotionPhoto="1"')), film], ['motion']],
    ] as const) {
      const path = bench.keep(Buffer.concat(file), 'several.jpg')
      await compare(name, path, () => magickLightness(bench.keep(base, 'base.jpg')), exact)
      expect((await probePicture({ path })).notes).toEqual(notes)
    }
  })
})

/** A file by heif-enc from the scene at an even size. */
const even = bench.fresh('even.png')
function encoded(name: string, options: string[], source = even): string {
  const target = bench.fresh(name)
  if (!existsSync(even)) execFileSync('convert', [scene, '-resize', '192x128!', even])
  execFileSync('heif-enc', ['-q', '92', ...name.endsWith('.avif') ? ['-A'] : ['-p', 'preset=veryfast'], ...options, '-o', target, source], { stdio: 'ignore', timeout: 30_000 })
  return target
}
const deep = (profile: string[] = []) => made('deep.png', '-resize', '192x128!', '-depth', '16', ...profile)
const wide = () => made('wide.png', '-resize', '192x128!', ...asP3)

describe('HEIC and AVIF are read as heif-convert reads them', () => {
  it.each([
    // Full chroma leaves nothing to choose; smaller chroma is stretched by other rules, which shows at coloured edges.
    ['full.heic', ['-p', 'chroma=444'], undefined, { max: 0.4, mean: 0.1 }], ['half.heic', [], undefined, { max: 1, mean: 0.05 }],
    ['full.avif', ['-p', 'chroma=444'], undefined, { max: 0.4, mean: 0.1 }], ['half.avif', [], undefined, { max: 1, mean: 0.05 }],
    ['deep.heic', ['-b', '10', '-p', 'chroma=444'], () => deep(), { max: 0.4, mean: 0.1 }],
    ['profile.heic', ['-p', 'chroma=444'], wide, { max: 0.4, mean: 0.1 }], ['profile.avif', ['-p', 'chroma=444'], wide, { max: 0.4, mean: 0.1 }],
  ] as const)('%s', async (name, options, source, tolerance) => {
    await compare(name, encoded(name, [...options], source?.()), heifConvertLightness, tolerance)
  })

  it('AVIF of 10 bits', async () => {
    const path = bench.keep(await sharp(deep()).toColourspace('rgb16').avif({ bitdepth: 10, quality: 92, chromaSubsampling: '4:4:4' }).toBuffer(), 'deep.avif')
    expect(await probePicture({ path })).toMatchObject({ bitDepth: 16 })
    await compare('deep.avif', path, heifConvertLightness, { max: 0.4, mean: 0.1 })
  })

  it.each(['numbers.heic', 'numbers.avif'])('%s: colours given by numbers as those of Display P3', async (name) => {
    const path = bench.keep(heifFile({ tile: codedPictureOf(readFileSync(encoded(name, ['-p', 'chroma=444']))), codePoints: [12, 13] }), name)
    expect(await probePicture({ path })).toMatchObject({ colourProfile: 'Display P3' })
    await compare(name, path, file => heifConvertLightness(file, p3), { max: 0.4, mean: 0.1 })
  })

  it('grids of tiles, turned and mirrored by their properties; Exif’s orientation is not asked', async () => {
    const tile = codedPictureOf(readFileSync(encoded('tile.heic', ['-p', 'chroma=444'], made('tile.png', '-resize', '128x64!'))))
    const small = codedPictureOf(readFileSync(encoded('tile.avif', ['-p', 'chroma=444'], made('tile.png', '-resize', '128x64!'))))
    for (const [name, bytes, sides] of [
      ['grid.heic', heifFile({ tile, grid: { rows: 2, columns: 3, width: 340, height: 120 } }), [340, 120]],
      ['grid-turned.heic', heifFile({ tile, grid: { rows: 2, columns: 3 }, quarterTurns: 1 }), [128, 384]],
      ['turned.heic', heifFile({ tile, quarterTurns: 3 }), [64, 128]], ['mirrored.heic', heifFile({ tile, mirrorAxis: 1 }), [128, 64]],
      ['turned-mirrored.avif', heifFile({ tile: small, quarterTurns: 1, mirrorAxis: 0 }), [64, 128]],
    ] as const) {
      const path = bench.keep(bytes, name)
      expect(await probePicture({ path })).toMatchObject({ width: sides[0], height: sides[1], orientation: 1 })
      await compare(name, path, heifConvertLightness, { max: 0.4, mean: 0.1 })
    }
  })

  it('white is white to the code, 8 and 10 bits', async () => {
    for (const depth of [8, 16]) {
      const white = bench.fresh('white.png')
      execFileSync('convert', ['-size', '64x64', 'xc:white', '-depth', String(depth), '-type', 'TrueColor', `PNG${depth === 16 ? 48 : 24}:${white}`])
      // AVIF by the engine's library: heif-enc 1.15 never ends with 10 bits of plain white.
      const avif = bench.keep(await sharp(white).toColourspace(depth === 16 ? 'rgb16' : 'srgb').avif({ lossless: true, bitdepth: depth === 16 ? 10 : 8, chromaSubsampling: '4:4:4' }).toBuffer(), 'white.avif')
      for (const path of [avif, encoded('white.heic', ['-L', '-p', 'chroma=444', '--matrix_coefficients', '0'], white)]) {
        const { lightness } = await engineLightness(path)
        expect([path, depth, Math.min(...lightness)]).toEqual([path, depth, 100])
      }
    }
  })
})
