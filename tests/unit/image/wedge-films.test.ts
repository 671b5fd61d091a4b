// Wedges' films are read back with programs that are not ours: libvips' and ImageMagick's command lines, poppler's, and zbar's
// for the code. Expected film codes are api.md's formula, written out here again; levels come from the layout itself.
import { execFileSync } from 'node:child_process'
import { readFileSync } from 'node:fs'
import { beforeAll, describe, expect, it } from 'vitest'
import { chartOf } from '#shared/calibration/wedge/chart'
import { centreOf } from '#shared/calibration/wedge/page'
import type { WedgePlan } from '#shared/calibration/wedge/plan'
import { onSheet, placeOnSheet } from '#shared/calibration/wedge/sheet'
import { layoutWedge } from '#shared/calibration/wedge-layout'
import type { WedgeFilmOrder } from '../../../server/image/protocol'
import { makeWedgePreview } from '../../../server/image/work/wedge-preview'
import { openWorkbench } from '../../support/pictures/workbench'

const bench = openWorkbench()
const run = (program: string, ...args: string[]) => execFileSync(program, args, { encoding: 'utf8' })
/** A matcher would compare millions of samples one by one. */
const sameSamples = (a: Uint16Array, b: Uint16Array): boolean => Buffer.from(a.buffer).equals(Buffer.from(b.buffer))
const code = '23456789A4'
const small = { kind: 'scattered', grid: '16x12', seed: 4711 } as const

const orderOf = (plan: WedgePlan, changes: Partial<WedgeFilmOrder> = {}): WedgeFilmOrder => ({
  format: 'tiff', plan, code, page: { widthMm: 160, heightMm: 130 }, throughCurve: null, pixelsPerInch: 300, mirror: true, inkColor: '#000000',
  lines: ['Mill paper & sons', '2026-03-01', 'TIFF, 300 ppi, <glossy film>'], title: 'Wedge 23456-789A4', ...changes,
})

/** What the formula asks for at the middle of each patch, and where that is on the film. */
function expected({ plan, page, pixelsPerInch, throughCurve, mirror }: WedgeFilmOrder, inkOf: (inkColor: string | undefined) => number[]) {
  const chart = chartOf(plan, pixelsPerInch, throughCurve)
  const sheet = placeOnSheet(chart.page, page, pixelsPerInch)
  return chart.patches.map(({ level, inkColor }, i) => {
    const [xMm, yMm] = centreOf(onSheet(sheet, chart.page.patches[i]!))
    const x = Math.floor(xMm / 25.4 * pixelsPerInch)
    return { x: mirror ? sheet.widthPx - 1 - x : x, y: Math.floor(yMm / 25.4 * pixelsPerInch), width: sheet.widthPx, codes: inkOf(inkColor).map(c => Math.round(65535 * (1 - level * (1 - c / 255)))) }
  })
}

describe('a wedge’s film', () => {
  it('has each patch’s film code in its middle, mirrored, read by libvips and ImageMagick', async () => {
    const order = orderOf(small)
    const { target } = await bench.wedgeFilm(order)
    const film = bench.vipsSamples(target)
    expect(sameSamples(bench.magickSamples(target), film)).toBe(true)
    const places = expected(order, () => [0])
    expect(places).toHaveLength(192)
    expect(places.map(({ x, y, width }) => film[y * width + x])).toEqual(places.map(({ codes }) => codes[0]))
    // The layout's own levels, cell by cell: 65535 − 257 · code.
    expect(places.map(({ codes }) => codes[0])).toEqual(layoutWedge(small).cells.map(({ level }) => 65535 - 257 * Math.round(255 * level)))
  })

  it('holds the exact level in the whole of each patch, to its last pixel', async () => {
    const order = orderOf(small)
    const film = bench.vipsSamples((await bench.wedgeFilm(order)).target)
    const { page, patches } = chartOf(small, 300)
    const sheet = placeOnSheet(page, order.page, 300)
    const pixels = (mm: number) => Math.round(mm / 25.4 * 300)
    page.patches.forEach((patch, i) => {
      const { xMm, yMm, widthMm, heightMm } = onSheet(sheet, patch)
      const seen = new Set<number>()
      for (let y = pixels(yMm); y < pixels(yMm + heightMm); y++) for (let x = pixels(xMm); x < pixels(xMm + widthMm); x++) seen.add(film[y * sheet.widthPx + sheet.widthPx - 1 - x]!)
      expect([...seen]).toEqual([65535 - 257 * Math.round(255 * patches[i]!.level)])
    })
  })

  it('is the unmirrored one turned over', async () => {
    const samples = async (mirror: boolean) => bench.vipsSamples((await bench.wedgeFilm(orderOf(small, { mirror }))).target)
    const [mirrored, upright] = [await samples(true), await samples(false)]
    const width = Math.round(160 / 25.4 * 300)
    const turned = new Uint16Array(upright.length)
    for (let i = 0; i < upright.length; i++) turned[i] = upright[i - 2 * (i % width) + width - 1]!
    expect(sameSamples(turned, mirrored)).toBe(true)
    expect(sameSamples(upright, mirrored)).toBe(false)
  })

  it('goes through a curve at 16 bit, as a negative’s tones do', async () => {
    const throughCurve = Array.from({ length: 1025 }, (_, i) => (i / 1024) ** 1.7)
    const order = orderOf(small, { throughCurve })
    const film = bench.vipsSamples((await bench.wedgeFilm(order)).target)
    const cells = layoutWedge(small).cells
    expected(order, () => [0]).forEach(({ x, y, width }, i) => {
      // Straight lines between 1025 points miss the power by at most h²/8 · f'' < 1e-6 away from 0; one code is 1.5e-5 (derived).
      expect(Math.abs(film[y * width + x]! - 65535 * (1 - cells[i]!.level ** 1.7))).toBeLessThanOrEqual(0.6)
    })
    expect(new Set(film).size).toBeGreaterThan(60)
  })

  it('is made of an ink’s own colour, and an ink trial of its mixes’', async () => {
    const green = orderOf(small, { inkColor: '#20a040', format: 'png' })
    const film = bench.magickSamples((await bench.wedgeFilm(green)).target, 'rgb')
    for (const { x, y, width, codes } of expected(green, () => [0x20, 0xA0, 0x40])) expect([...film.subarray(3 * (y * width + x), 3 * (y * width + x) + 3)]).toEqual(codes)

    const mixes = { '#000000': [0, 0, 0], '#802000': [0x80, 0x20, 0], '#004060': [0, 0x40, 0x60] } as const
    const trial = orderOf({ kind: 'ink-trial', grid: '16x12', seed: 3, mixes: Object.keys(mixes) })
    const mixed = bench.magickSamples((await bench.wedgeFilm(trial)).target, 'rgb')
    for (const { x, y, width, codes } of expected(trial, mix => [...mixes[mix as keyof typeof mixes]])) expect([...mixed.subarray(3 * (y * width + x), 3 * (y * width + x) + 3)]).toEqual(codes)
  })

  it.each(['tiff', 'png', 'pdf'] as const)('has the same bytes from the same record (%s)', async (format) => {
    const [first, again, other] = [await bench.wedgeFilm(orderOf(small, { format })), await bench.wedgeFilm(orderOf(small, { format })), await bench.wedgeFilm(orderOf({ ...small, seed: 4712 }, { format }))]
    expect(again.sha256).toBe(first.sha256)
    expect(other.sha256).not.toBe(first.sha256)
  })

  it.each([['A4', { widthMm: 210, heightMm: 297 }, 595.276, 841.89], ['Letter', { widthMm: 215.9, heightMm: 279.4 }, 612, 792]] as const)('is a page of exactly %s as a PDF, every pixel of a patch in its 8-bit code', async (_, page, width, height) => {
    const plan = { kind: 'scattered', grid: '24x24', seed: 8 } as const
    const order = orderOf(plan, { format: 'pdf', page })
    const { target } = await bench.wedgeFilm(order)
    const [, w, h] = /Page size:\s+([\d.]+) x ([\d.]+) pts/.exec(run('pdfinfo', target))!
    expect(Number(w)).toBeCloseTo(width, 2)
    expect(Number(h)).toBeCloseTo(height, 2)
    expect(run('pdfinfo', target)).toMatch(/Title:\s+Wedge 23456-789A4/)
    const root = bench.fresh('page')
    run('pdfimages', '-png', target, root)
    const pixels = execFileSync('convert', [`${root}-000.png`, '-depth', '8', 'gray:-'], { maxBuffer: 1 << 30 })
    expect(pixels).toHaveLength(Math.round(page.widthMm / 25.4 * 300) * Math.round(page.heightMm / 25.4 * 300))
    for (const { x, y, width: columns, codes } of expected(order, () => [0])) {
      for (const [dx, dy] of [[0, 0], [-20, -20], [20, 20]] as const) expect(pixels[(y + dy) * columns + x + dx]).toBe(codes[0]! / 257)
    }
  })

  it('says its resolution', async () => {
    const { target } = await bench.wedgeFilm(orderOf(small, { pixelsPerInch: 360 }))
    expect(run('identify', '-format', '%x %y %U %z', target)).toBe('360 360 PixelsPerInch 16')
    expect(readFileSync((await bench.wedgeFilm(orderOf(small, { format: 'pdf' }))).target, 'latin1')).toContain('/PrintScaling /None')
  })

  it('leaves the sheet around the chart clear but for the lines to cut along', async () => {
    const order = orderOf(small, { mirror: false })
    const film = bench.vipsSamples((await bench.wedgeFilm(order)).target)
    const { page } = chartOf(small, 300)
    const sheet = placeOnSheet(page, order.page, 300)
    const [right, bottom] = [sheet.leftPx + Math.round(page.widthMm / 25.4 * 300), sheet.topPx + Math.round(page.heightMm / 25.4 * 300)]
    let inked = 0
    film.forEach((value, i) => {
      const [x, y] = [i % sheet.widthPx, Math.floor(i / sheet.widthPx)]
      if (x >= sheet.leftPx - 2 && x < right + 2 && y >= sheet.topPx - 2 && y < bottom + 2) return
      if (value !== 65535) inked++
    })
    // Eight lines of 3 × 0.25 mm: 35 × 3 pixels each, give or take a pixel.
    expect(inked).toBeGreaterThan(8 * 34 * 2)
    expect(inked).toBeLessThan(8 * 37 * 4)
  })
})

describe('the code on a print', () => {
  /** As a print of the film: turned over, light where ink was, in the paper's tones; then as a scan or picture of it. */
  const picture = (film: string, ...treatment: string[]): string => {
    const target = bench.fresh('print.jpg')
    run('convert', film, '-flop', '-negate', '-depth', '8', '+level', '12%,88%', '-colorspace', 'sRGB', ...treatment, target)
    return target
  }
  let film = ''
  beforeAll(async () => {
    film = (await bench.wedgeFilm(orderOf(small, { page: { widthMm: 144, heightMm: 110 } }))).target
  })
  const codesIn = (path: string) => run('zbarimg', '--quiet', '--raw', '--nodbus', '-Sdisable', '-Sqrcode.enable', path).trim().split('\n')

  it.each([
    ['as it lies', []], ['turned a quarter', ['-rotate', '90']], ['upside down', ['-rotate', '180']], ['askew', ['-background', 'gray20', '-rotate', '7']], ['turned by 33°', ['-background', 'gray80', '-rotate', '33']],
    ['at 150 ppi', ['-resize', '50%', '-quality', '80']], ['at 100 ppi, blurred, in a coarse JPEG', ['-resize', '33.3%', '-blur', '0x0.8', '-quality', '40']],
    ['blurred by 0.25 mm', ['-blur', '0x3']], ['in perspective', ['-distort', 'Perspective', '0,0 60,40 1701,0 1660,0 1701,1299 1701,1270 0,1299 0,1250']],
  ] as const)('is read by zbar %s', (_, treatment) => {
    expect(codesIn(picture(film, ...treatment))).toEqual([code])
  })

  it.each([
    ['numbered', { kind: 'numbered', steps: 21 }], ['ink-trial', { kind: 'ink-trial', grid: '24x16', seed: 1, mixes: ['#000000', '#303030'] }], ['ink-load', { kind: 'ink-load', grid: '24x16' }],
    ['exposure-strip', { kind: 'exposure-strip', grid: '24x16', strip: { firstExposure: 30, unit: 's', steps: 10, stopsPerStep: 0.5 } }],
    ['step-tablet', { kind: 'step-tablet', grid: '24x16', tablet: { steps: 21, stepWidthMm: 6, stepHeightMm: 12 } }],
  ] as [string, WedgePlan][])('stands on every kind of film (%s)', async (_, plan) => {
    const { target } = await bench.wedgeFilm(orderOf(plan, { page: { widthMm: 210, heightMm: 148.5 } }))
    expect(codesIn(picture(target, '-resize', '50%'))).toEqual([code])
  })
})

describe('a wedge’s preview', () => {
  it('shows the sheet as the print reads: lighter where the level is higher, in the asked width', async () => {
    const order = orderOf(small)
    const target = bench.fresh('preview.png')
    expect(await makeWedgePreview({ target, order, width: 640, palette: 'kallitype' })).toEqual({ width: 640, height: 520 })
    const grey = execFileSync('convert', [target, '-colorspace', 'Gray', '-depth', '8', 'gray:-'], { maxBuffer: 1 << 30 })
    expect(grey).toHaveLength(640 * 520)
    const { page, patches } = chartOf(small, 300)
    const sheet = placeOnSheet(page, order.page, 300)
    const tones = patches.map(({ level }, i) => {
      const [x, y] = centreOf(onSheet(sheet, page.patches[i]!))
      return { level, tone: grey[Math.floor(y * 4) * 640 + Math.floor(x * 4)]! }
    }).sort((a, b) => a.level - b.level)
    tones.forEach(({ tone }, i) => expect(tone).toBeGreaterThanOrEqual((tones[i - 1]?.tone ?? 0) - 1))
    expect(tones.at(-1)!.tone - tones[0]!.tone).toBeGreaterThan(150)
  })
})
