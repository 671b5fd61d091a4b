import { describe, expect, it, vi } from 'vitest'
import type { ScanPicture } from '#shared/calibration/reading/picture'
import type { ScanOptions, ScanReport } from '#shared/calibration/reading/read-scan'
import { readScan } from '#shared/calibration/reading/read-scan'
import { centreOf } from '#shared/calibration/wedge/page'
import { scatteredGrids, scatteredPage } from '#shared/calibration/wedge/scattered-page'
import type { Camera } from '../../../support/scan-simulator/camera'
import type { FlatbedPlacement } from '../../../support/scan-simulator/cameras'
import { flatbed, phone } from '../../../support/scan-simulator/cameras'
import { printOf, responseOf, wedgeOnFilm } from '../../../support/scan-simulator/scenes'
import type { Optics } from '../../../support/scan-simulator/take-picture'
import { takePicture } from '../../../support/scan-simulator/take-picture'

vi.setConfig({ testTimeout: 120_000 })

const wedge = wedgeOnFilm({ columns: 16, rows: 12 }, 11)
const { page, levels } = wedge
const lightnessOf = responseOf(18, 94, 0.8)
const print = printOf(wedge, { lightnessOf, seed: 4 })
type Found = Extract<ScanReport, { found: true }>

const onFlatbed = (placement: Partial<FlatbedPlacement> = {}): Camera => flatbed(page, { pixelsPerInch: 300, seed: 9, ...placement })
const scan = (camera: Camera, optics: Optics = {}): ScanPicture => takePicture(print, camera, { blurPx: 0.6, noiseCodes: 0.7, ...optics })

function read(picture: ScanPicture, options: ScanOptions = { levels }): Found {
  const report = readScan(picture, [page], options)
  if (!report.found) throw new Error('The wedge was not found.')
  return report
}

const errorsOf = (report: Found): number[] => report.patches.map((patch, i) => patch ? Math.abs(patch.lightness - lightnessOf(levels[i]!)) : NaN)
const worst = (report: Found): number => Math.max(...errorsOf(report))
const codesOf = (report: ScanReport): string[] => report.warnings.map(warning => warning.code)
const cornerError = (report: Found, camera: Camera): number => Math.max(...report.corners.map((corner, id) => {
  const [x, y] = camera.toPicture(centreOf(page.markers[id]!.place))
  return Math.hypot(x - corner[0], y - corner[1])
}))

describe('a flatbed scan at 300 pixels per inch of a noise-free print', () => {
  it.each([[-5, 0], [5, 1], [2.5, 2], [-1, 3]])('skewed by %d° after %d quarter turns, gently warped, reads every patch to 0.15 L* and the corners to 0.3 pixels', (skewDegrees, quarterTurns) => {
    const camera = onFlatbed({ skewDegrees, quarterTurns, warpMm: 0.5 })
    const report = read(scan(camera))
    expect(report.patches).toHaveLength(192)
    expect(worst(report)).toBeLessThanOrEqual(0.15)
    expect(cornerError(report, camera)).toBeLessThanOrEqual(0.3)
    expect([report.quality, report.mirrored, report.inverted, codesOf(report)]).toEqual(['scan', false, false, []])
    const turned = ((skewDegrees + 90 * quarterTurns + 180) % 360) - 180
    expect(Math.abs(report.turnedDegrees - turned)).toBeLessThan(0.5)
  })

  it('reads the same from a 16-bit tone plane', () => {
    expect(worst(read(scan(onFlatbed({ skewDegrees: 3 }), { kind: 'tone16' })))).toBeLessThanOrEqual(0.05)
  })

  it('gives the same readings when the file is turned by a quarter', () => {
    const picture = scan(onFlatbed({ skewDegrees: 2 }))
    const [before, after] = [read(picture), read(turnedByQuarter(picture))]
    const difference = Math.max(...before.patches.map((patch, i) => Math.abs(patch!.lightness - after.patches[i]!.lightness)))
    expect(difference).toBeLessThan(0.05)
  })

  it('follows waves of 1.5 mm inside the field, where no markers stand', () => {
    const camera = onFlatbed({ warpMm: 1.5 })
    const report = read(scan(camera))
    const misses = report.cells.map((cell, i) => {
      const [x, y] = camera.toPicture(centreOf(page.patches[i]!))
      return Math.hypot((cell[0][0] + cell[2][0]) / 2 - x, (cell[0][1] + cell[2][1]) / 2 - y)
    })
    expect(Math.max(...misses)).toBeLessThan(1.5)
  })

  it('is little disturbed by dust and hairs', () => {
    const errors = errorsOf(read(scan(onFlatbed(), { soilCount: 200, soilPx: 3, seed: 5 }))).sort((a, b) => a - b)
    expect(errors[Math.floor(errors.length * 0.95)]).toBeLessThan(0.15)
  })

  it('has 2 % of stray light taken out: 95 % of the patches within 0.3 L*, where they were off by more than 1', () => {
    const picture = scan(onFlatbed(), { glareShare: 0.02, glareRadiusPx: 90 })
    const p95 = (report: Found): number => errorsOf(report).sort((a, b) => a - b)[Math.floor(192 * 0.95)]!
    const corrected = read(picture)
    expect(p95(read(picture, {}))).toBeGreaterThan(1)
    expect(p95(corrected)).toBeLessThan(0.3)
    expect(Math.abs(corrected.glareShare - 0.02)).toBeLessThan(0.005)
  })

  it('reads foil and bare coated paper, and a*b* of a coloured print', () => {
    const report = read(scan(onFlatbed({ marginMm: 30 }), { hue: lightness => [0, -20 * (1 - lightness / 100)] }))
    expect(report.diagnostics.bare!.lightness).toBeCloseTo(18, 0)
    expect(report.diagnostics.foil!.lightness).toBeCloseTo(18, 0)
    const [l, a, b] = report.patches[0]!.lab
    expect(Math.hypot(a, b + 20 * (1 - l / 100))).toBeLessThan(0.3)
  })
})

describe('a phone picture', () => {
  const camera = phone(page, { width: 3000, height: 2250, filled: 0.8, tiltXDegrees: 15, tiltYDegrees: -10, rollDegrees: 4, distortion: -0.02, warpMm: 0.8, seed: 2 })

  it('in perspective is noticed, evened out, scaled to the paper and marked', () => {
    const picture = takePicture(print, camera, { blurPx: 1.2, noiseCodes: 2, light: (u, v) => 0.9 * (1 - 0.25 * u) * (1 - 0.3 * ((u - 0.5) ** 2 + (v - 0.5) ** 2)) })
    const report = read(picture, { levels, paperLightness: 94 })
    expect(report.quality).toBe('phone')
    expect(codesOf(report)).toEqual(expect.arrayContaining(['phone', 'uneven_light']))
    expect(worst(report)).toBeLessThan(0.6)
    expect(cornerError(report, camera)).toBeLessThan(0.5)
  })
})

describe('what is wrong with a picture is recognised', () => {
  const onFlatbed = (placement: Partial<FlatbedPlacement> = {}): Camera => flatbed(page, { pixelsPerInch: 200, seed: 9, ...placement })
  const sound = scan(onFlatbed())

  it('mirrored: film exposed wrong side up, with its patches still in order', () => {
    const wrongSide = takePicture(printOf(wedge, { lightnessOf, seed: 4, wrongSideUp: true }), onFlatbed({ skewDegrees: 1 }), { noiseCodes: 0.7 })
    const report = read(wrongSide)
    expect(codesOf(report)).toEqual(['mirrored'])
    expect(worst(report)).toBeLessThanOrEqual(0.2)
  })

  it('inverted, and the film itself: inverted and mirrored', () => {
    expect(codesOf(read(scan(onFlatbed(), { inverted: true })))).toContain('inverted')
    expect(codesOf(read(scan(onFlatbed({ mirrored: true }), { inverted: true })))).toContain('film_itself')
  })

  it('cropped: what is inside is read, what is outside is null', () => {
    const report = read(cropped(sound, 0.25))
    expect(codesOf(report)).toContain('cropped')
    expect(report.patches.some(patch => patch === null)).toBe(true)
    expect(Math.max(...errorsOf(report).filter(error => !Number.isNaN(error)))).toBeLessThanOrEqual(0.2)
  })

  it('too few pixels, and soft edges', () => {
    expect(codesOf(read(scan(onFlatbed({ pixelsPerInch: 120 }))))).toEqual(['too_small'])
    expect(codesOf(read(scan(onFlatbed(), { blurPx: 2.7 })))).toEqual(['blurred'])
  })

  it('clipped at either end', () => {
    expect(codesOf(read(scan(onFlatbed(), { toneCurve: v => Math.min(1, v * 1.12) })))).toContain('clipped_light')
    expect(codesOf(read(scan(onFlatbed(), { toneCurve: v => Math.max(0, (v - 0.25) / 0.75) })))).toContain('clipped_dark')
  })

  it('stretched after the scan, not so a sound scan', () => {
    const stretched = { ...sound, codes: Uint8Array.from(sound.codes, code => Math.min(255, Math.max(0, Math.round((code - 30) * 1.25)))) }
    expect(codesOf(read(stretched))).toContain('auto_levelled')
    expect(codesOf(read(sound))).toEqual([])
  })

  it('another wedge’s print', () => {
    const other = wedgeOnFilm({ columns: 16, rows: 12 }, 12)
    expect(codesOf(read(sound, { levels: other.levels }))).toContain('other_wedge')
  })

  it('a faint print', () => {
    const faint = takePicture(printOf(wedge, { lightnessOf: responseOf(72, 94, 1), seed: 4 }), onFlatbed(), { noiseCodes: 0.7 })
    expect(codesOf(read(faint))).toContain('weak_contrast')
  })

  it('no wedge at all, in a sentence that says what to do', () => {
    const blank: ScanPicture = { ...sound, codes: new Uint8Array(sound.codes.length).fill(180) }
    const report = readScan(blank, [page], { levels })
    expect([report.found, codesOf(report)]).toEqual([false, ['not_found']])
    expect(report.warnings[0]!.message).toMatch(/four corners/)
  })
})

describe('the page', () => {
  it('is told from other sizes of wedge by its markers alone', () => {
    const pages = scatteredGrids.map(grid => scatteredPage(grid))
    const report = readScan(scan(onFlatbed({ pixelsPerInch: 200 })), pages, {})
    expect(report.found && [report.page.columns, report.page.rows]).toEqual([16, 12])
  })

  it('is read from corners put by hand within a millimetre as if it had been found', () => {
    const camera = onFlatbed({ skewDegrees: 2 })
    const corners = [0, 1, 2, 3].map((id) => {
      const [x, y] = camera.toPicture(centreOf(page.markers[id]!.place))
      return [x + (id % 2 ? 6 : -6), y + 5] as const
    }) as unknown as NonNullable<ScanOptions['corners']>
    expect(worst(read(scan(camera), { levels, corners }))).toBeLessThanOrEqual(0.15)
  })

  it('is read from corners put by hand even when no marker can be seen', () => {
    const camera = onFlatbed({ pixelsPerInch: 200 })
    const bare = { ...page, markers: page.markers.map(marker => ({ ...marker, id: (marker.id + 1) % 20 })) }
    const corners = [0, 1, 2, 3].map(id => camera.toPicture(centreOf(page.markers[id]!.place))) as unknown as NonNullable<ScanOptions['corners']>
    const report = readScan(scan(camera), [bare], { corners })
    expect(report.found && worst(report)).toBeLessThanOrEqual(0.2)
  })
})

function turnedByQuarter({ width, height, channels, codes, colour }: ScanPicture): ScanPicture {
  const out = new Uint8Array(codes.length)
  for (let y = 0; y < height; y++) {
    for (let x = 0; x < width; x++) {
      for (let c = 0; c < channels; c++) out[(x * height + height - 1 - y) * channels + c] = codes[(y * width + x) * channels + c]!
    }
  }
  return { width: height, height: width, channels, codes: out, colour }
}

/** Without a share of its width on the right. */
function cropped({ width, height, channels, codes, colour }: ScanPicture, share: number): ScanPicture {
  const kept = Math.round(width * (1 - share))
  const out = new Uint8Array(kept * height * channels)
  for (let y = 0; y < height; y++) out.set(codes.subarray(y * width * channels, (y * width + kept) * channels), y * kept * channels)
  return { width: kept, height, channels, codes: out, colour }
}
