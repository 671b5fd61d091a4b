import { describe, expect, it } from 'vitest'
import { isInkModule, markerCodes } from '#shared/calibration/wedge/marker-codes'
import type { RectMm } from '#shared/calibration/wedge/page'
import { centreOf, rect } from '#shared/calibration/wedge/page'
import type { LevelRaster } from '#shared/calibration/wedge/paint'
import { paintWedge, stampCoverage } from '#shared/calibration/wedge/paint'
import { scatteredGrids, scatteredPage } from '#shared/calibration/wedge/scattered-page'
import { snapWedgePage } from '#shared/calibration/wedge/snap'

const page = scatteredPage({ columns: 16, rows: 12 })
const levels = page.patches.map((_, i) => i * 83 % 256 / 255)
const modules = Array.from({ length: 441 }, (_, i) => i % 3 === 0)
const at = ({ codes, widthPx, pixelsPerInch }: LevelRaster, [xMm, yMm]: readonly [number, number]): number =>
  codes[Math.floor(yMm / 25.4 * pixelsPerInch) * widthPx + Math.floor(xMm / 25.4 * pixelsPerInch)]!

describe.each([300, 360, 720])('a wedge painted at %d pixels per inch', (ppi) => {
  const raster = paintWedge(page, levels, modules.map(Number), ppi)
  const snapped = snapWedgePage(page, ppi)

  it('has the page’s size in whole pixels', () => {
    expect([raster.widthPx, raster.heightPx]).toEqual([Math.round(144 / 25.4 * ppi), Math.round(110 / 25.4 * ppi)])
  })

  it('fills each cell with its level to the last pixel, and only with whole levels', () => {
    const toPx = (mm: number): number => Math.round(mm / 25.4 * ppi)
    for (const [i, { xMm, yMm, widthMm, heightMm }] of snapped.patches.entries()) {
      const wanted = Math.round(255 * levels[i]!)
      for (const y of [toPx(yMm), toPx(yMm + heightMm) - 1]) {
        for (const x of [toPx(xMm), toPx(xMm + widthMm) - 1]) expect(raster.codes[y * raster.widthPx + x], `cell ${i}`).toBe(wanted)
      }
    }
  })

  it('leaves no seam between a marker’s modules', () => {
    for (const grid of scatteredGrids) {
      const whole = snapWedgePage(scatteredPage(grid), ppi)
      const raster = paintWedge(whole, whole.patches.map(() => 0), null, ppi)
      const pixels = (mm: number): number => Math.round(mm / 25.4 * ppi)
      for (const { id, place } of whole.markers) {
        // Along the middle of the frame's upper and left modules everything is full ink, whatever the pattern.
        const [x, y] = [pixels(place.xMm + place.widthMm / 12), pixels(place.yMm + place.heightMm / 12)]
        const across = raster.codes.subarray(y * raster.widthPx + pixels(place.xMm), y * raster.widthPx + pixels(place.xMm + place.widthMm))
        const down = Array.from({ length: pixels(place.heightMm) }, (_, i) => raster.codes[(pixels(place.yMm) + i) * raster.widthPx + x])
        expect([...across, ...down].filter(code => code !== 255), `marker ${id}`).toEqual([])
      }
    }
  })

  it('shows every marker’s modules, with full ink on one side and clear film on the other', () => {
    for (const { id, place, fullInk, clear } of snapped.markers) {
      for (let row = 0; row < 6; row++) {
        for (let column = 0; column < 6; column++) {
          const centre = [place.xMm + (column + 0.5) * place.widthMm / 6, place.yMm + (row + 0.5) * place.heightMm / 6] as const
          expect(at(raster, centre), `${id}: ${row}, ${column}`).toBe(isInkModule(markerCodes[id]!, row, column) ? 255 : 0)
        }
      }
      expect([at(raster, centreOf(fullInk)), at(raster, centreOf(clear))]).toEqual([255, 0])
    }
  })

  it('draws the code with clear film where it is dark', () => {
    const { xMm, yMm, widthMm } = snapped.identity.symbol
    const module = widthMm / 21
    for (const [i, dark] of modules.entries()) {
      const centre = [xMm + (i % 21 + 0.5) * module, yMm + (Math.floor(i / 21) + 0.5) * module] as const
      expect(at(raster, centre), `module ${i}`).toBe(dark ? 0 : 255)
    }
  })
})

describe('painting', () => {
  it('gives the same levels at 8 bits whatever the resolution', () => {
    const centres = (ppi: number): number[] => {
      const raster = paintWedge(page, levels, null, ppi)
      return page.patches.map(patch => at(raster, centreOf(patch)))
    }
    expect(centres(300)).toEqual(centres(720))
  })

  it('refuses another number of levels or modules', () => {
    expect(() => paintWedge(page, levels.slice(1), null, 300)).toThrow(/192 patches/)
    expect(() => paintWedge(page, levels, [1], 300)).toThrow(/21 × 21/)
  })

  it('lays text with its soft edges on film, cut at its place', () => {
    const raster = paintWedge(page, levels, null, 254)
    const place: RectMm = rect(30, page.heightMm - 12, 0.3, 0.2)
    stampCoverage(raster, place, 'full', { widthPx: 5, heightPx: 5, coverage: new Uint8Array(25).fill(128) })
    const row = Math.round((page.heightMm - 12) * 10)
    expect(Array.from(raster.codes.subarray(row * raster.widthPx + 299, row * raster.widthPx + 305))).toEqual([0, 128, 128, 128, 0, 0])
  })
})
