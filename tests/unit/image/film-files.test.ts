// Files are read back with programs that are not ours: libvips' and ImageMagick's command lines, poppler's pdfinfo and pdfimages.
import { execFileSync } from 'node:child_process'
import { createHash } from 'node:crypto'
import { readFileSync } from 'node:fs'
import { join } from 'node:path'
import { describe, expect, it } from 'vitest'
import type { FilmOrder } from '../../../server/image/protocol'
import { pngFile } from '../../support/pictures/png-file'
import { filmOrder, openWorkbench } from '../../support/pictures/workbench'

const bench = openWorkbench()
const width = 300, height = 200
const gradient = bench.keep(pngFile({ width, height, bitDepth: 16, channels: 1, samples: Array.from({ length: width * height }, (_, i) => Math.round(65535 * ((i % width) / width * 0.7 + Math.floor(i / width) / height * 0.3))) }))
const run = (program: string, ...args: string[]) => execFileSync(program, args, { encoding: 'utf8' })
const header = (path: string, field: string) => run('vipsheader', '-f', field, path).trim()

/** 127 × 84.67 mm at 300 ppi, with a margin: sides that are no whole number of points. */
const sized: Partial<FilmOrder> = { pixelsPerInch: 300, margin: { pixels: 24, kind: 'opaque' }, filmMm: { width: 29.4, height: 20.933 } }

/** Gray of a PDF's picture, as poppler takes it out. */
function pdfPixels(path: string): Uint8Array {
  const root = join(bench.fresh('pdf'))
  run('pdfimages', '-png', path, root)
  return execFileSync('convert', [`${root}-000.png`, '-depth', '8', 'gray:-'], { maxBuffer: 1 << 30 })
}

describe('a TIFF film', () => {
  it('is 16-bit grey with its resolution in inches and no profile', async () => {
    const { target, bytes, sha256 } = await bench.film(gradient, filmOrder(width, height, sized))
    expect([header(target, 'width'), header(target, 'height'), header(target, 'bands'), header(target, 'format')]).toEqual(['348', '248', '1', '((VipsBandFormat) VIPS_FORMAT_USHORT)'])
    expect(header(target, 'resolution-unit')).toBe('in')
    expect(Number(header(target, 'xres')) * 25.4).toBeCloseTo(300, 3)
    expect(run('identify', '-format', '%x %y %U %z %[type] %C', target)).toBe('300 300 PixelsPerInch 16 Grayscale Zip')
    expect(run('vipsheader', '-a', target)).not.toContain('icc-profile')
    expect(readFileSync(target)).toHaveLength(bytes)
    expect(createHash('sha256').update(readFileSync(target)).digest('hex')).toBe(sha256)
  })
})

describe('a PNG film', () => {
  it('has the TIFF’s pixels, 16 bit, its resolution and neither profile nor gamma', async () => {
    const tiff = await bench.film(gradient, filmOrder(width, height, sized))
    const png = await bench.film(gradient, filmOrder(width, height, { ...sized, format: 'png' }))
    expect(bench.vipsSamples(png.target)).toEqual(bench.vipsSamples(tiff.target))
    expect(bench.magickSamples(png.target)).toEqual(bench.vipsSamples(tiff.target))
    const file = readFileSync(png.target)
    expect(['iCCP', 'gAMA', 'sRGB', 'cHRM'].filter(type => file.includes(type))).toEqual([])
    // 300 / 0.0254 = 11811 pixels a metre (derived)
    expect(run('identify', '-units', 'PixelsPerInch', '-format', '%x %z', png.target)).toMatch(/^(299\.99\d*|300) 16$/)
  })
})

describe('a PDF film', () => {
  const order = filmOrder(width, height, { ...sized, format: 'pdf' })

  it('has a page of exactly the film’s size, one grey picture over it, and asks not to be scaled', async () => {
    const { target } = await bench.film(gradient, order)
    const info = run('pdfinfo', '-box', target)
    const [, w, h] = /Page size:\s+([\d.]+) x ([\d.]+) pts/.exec(info)!
    // 1 mm = 72/25.4 points (derived)
    expect(Number(w)).toBeCloseTo(29.4 * 72 / 25.4, 2)
    expect(Number(h)).toBeCloseTo(20.933 * 72 / 25.4, 2)
    expect(info).toMatch(/PDF version:\s+1\.7/)
    expect(info).toMatch(/Pages:\s+1\n/)
    expect(info).toMatch(/Title:\s+Test film/)
    const [line] = run('pdfimages', '-list', target).trim().split('\n').slice(2)
    expect(line!.trim().split(/\s+/).slice(2, 10)).toEqual(['image', '348', '248', 'gray', '1', '8', 'image', 'no'])
    const file = readFileSync(target, 'latin1')
    expect(file).toContain('/PrintScaling /None')
    expect(file).toContain('/MediaBox [0 0 83.33858 59.33764]')
  })

  it('keeps the mean of every small area when it goes to 8 bit, and bare and full areas exact', async () => {
    const film = bench.vipsSamples((await bench.film(gradient, { ...order, format: 'tiff' })).target)
    const page = pdfPixels((await bench.film(gradient, order)).target)
    expect(page).toHaveLength(film.length)
    let worst = 0, sum = 0
    for (let i = 0; i < film.length; i++) sum += page[i]! - film[i]! / 257
    for (let top = 24; top + 8 <= 224; top += 8) {
      for (let left = 24; left + 8 <= 324; left += 8) {
        let difference = 0
        for (let i = 0; i < 64; i++) {
          const at = (top + (i >> 3)) * 348 + left + (i & 7)
          difference += page[at]! - film[at]! / 257
        }
        worst = Math.max(worst, Math.abs(difference / 64))
      }
    }
    expect(Math.abs(sum / film.length)).toBeLessThan(0.002)
    expect(worst).toBeLessThan(0.15)
    expect(page.subarray(0, 348 * 24).every(code => code === 0)).toBe(true)
  })

  it('is made of three channels for an ink of another colour', async () => {
    const { target } = await bench.film(gradient, { ...order, inkColor: '#004080' })
    expect(run('pdfimages', '-list', target)).toMatch(/348\s+248\s+rgb\s+3\s+8/)
  })
})

describe('the same order', () => {
  it.each(['tiff', 'png', 'pdf'] as const)('gives the same bytes (%s), another render key another PDF identity only', async (format) => {
    const order = filmOrder(width, height, { ...sized, format, marks: { ruler: true, label: true, labelText: 'Reed bed, 12 × 8 cm' } })
    const [first, second, other] = [await bench.film(gradient, order, 'one'), await bench.film(gradient, order, 'one'), await bench.film(gradient, order, 'two')]
    expect(second.sha256).toBe(first.sha256)
    expect(other.sha256 === first.sha256).toBe(format !== 'pdf')
    expect(other.bytes).toBe(first.bytes)
  })
})

describe('margins', () => {
  const black = bench.keep(pngFile({ width: 40, height: 20, bitDepth: 8, channels: 1, samples: new Uint8Array(800) }))

  it.each([['clear', 65535], ['opaque', 0]] as const)('are %s all around', async (kind, code) => {
    const { target } = await bench.film(black, filmOrder(40, 20, { margin: { pixels: 7, kind } }))
    const film = bench.vipsSamples(target)
    expect(film).toHaveLength(54 * 34)
    film.forEach((value, i) => {
      const x = i % 54, y = Math.floor(i / 54)
      expect(value).toBe(x >= 7 && x < 47 && y >= 7 && y < 27 ? 65535 : code)
    })
  })

  it('also fill the sides of a contained picture', async () => {
    const { target } = await bench.film(black, filmOrder(40, 40, { margin: { pixels: 5, kind: 'opaque' } }))
    const film = bench.vipsSamples(target)
    const rows = Array.from({ length: 50 }, (_, y) => film[y * 50 + 25])
    expect(rows.findIndex(code => code === 65535)).toBe(15)
    expect(rows.filter(code => code === 65535)).toHaveLength(20)
  })
})

describe('marks', () => {
  const white = bench.keep(pngFile({ width: 40, height: 20, bitDepth: 8, channels: 1, samples: new Uint8Array(800).fill(255) }))
  /** 40 × 20 mm at 254 ppi is 400 × 200 pixels; 10 pixels are 1 mm. */
  const marked = (changes: Partial<FilmOrder> = {}) => filmOrder(400, 200, { pixelsPerInch: 254, margin: { pixels: 80, kind: 'clear' }, marks: { ruler: true, label: true, labelText: 'Kiln & quay <3>' }, ...changes })
  const filmWidth = 560

  it('stand at each whole millimetre from the print’s corner, longest at ten', async () => {
    const film = bench.vipsSamples((await bench.film(white, marked())).target)
    const inkAt = (x: number, y: number) => film[y * filmWidth + x]! === 0
    const lengthUp = (mm: number) => Array.from({ length: 80 }, (_, i) => inkAt(80 + 10 * mm, 79 - i)).indexOf(false)
    const lengthLeft = (mm: number) => Array.from({ length: 80 }, (_, i) => inkAt(79 - i, 80 + 10 * mm)).indexOf(false)
    expect([0, 1, 5, 10, 40].map(lengthUp)).toEqual([30, 12, 20, 30, 30])
    expect([0, 1, 5, 10, 20].map(lengthLeft)).toEqual([30, 12, 20, 30, 30])
    const ticks = Array.from({ length: 401 }, (_, i) => i).filter(i => inkAt(80 + i, 75) && !inkAt(79 + i, 75))
    expect(ticks).toEqual(Array.from({ length: 41 }, (_, mm) => 10 * mm))
  })

  it('are mirrored with the film, so that they read right on the print', async () => {
    const upright = bench.vipsSamples((await bench.film(white, marked())).target)
    const mirrored = bench.vipsSamples((await bench.film(white, marked({ mirror: true }))).target)
    const back = new Uint16Array(mirrored.length)
    for (let i = 0; i < mirrored.length; i++) back[i] = mirrored[i - 2 * (i % filmWidth) + filmWidth - 1]!
    expect(back).toEqual(upright)
  })

  it('hold the label’s line below the print only', async () => {
    const inked = async (text: string) => {
      const film = bench.vipsSamples((await bench.film(white, marked({ marks: { ruler: false, label: true, labelText: text } }))).target)
      const rows = new Set<number>(), columns = new Set<number>()
      film.forEach((code, i) => {
        const x = i % filmWidth, y = Math.floor(i / filmWidth)
        const inPrint = x >= 80 && x < 480 && y >= 80 && y < 280
        if (inPrint || code >= 30000) return
        rows.add(y)
        columns.add(x)
      })
      return { top: Math.min(...rows), bottom: Math.max(...rows), left: Math.min(...columns), right: Math.max(...columns) }
    }
    const short = await inked('Quay'), long = await inked('Quay and kiln, 40 × 20 mm, paper no. 7 — a line far too long for the film’s margin')
    expect(short.top).toBeGreaterThanOrEqual(280)
    expect(short.bottom).toBeLessThan(360)
    expect(short.left).toBeGreaterThanOrEqual(80)
    expect(short.left).toBeLessThan(90)
    expect(long.right).toBeGreaterThan(short.right)
    expect(long.right).toBeLessThan(filmWidth)
  })

  it('are clear lines in an opaque margin', async () => {
    const film = bench.vipsSamples((await bench.film(white, marked({ margin: { pixels: 80, kind: 'opaque' } }))).target)
    expect([film[75 * filmWidth + 80], film[75 * filmWidth + 85]]).toEqual([65535, 0])
  })
})
