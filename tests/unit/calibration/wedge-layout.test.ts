import { describe, expect, it } from 'vitest'
import { imbalance } from '../../../shared/calibration/wedge-balance'
import type { WedgeGrid } from '../../../shared/calibration/wedge-layout'
import { layoutWedge, vanDerCorput, wedgeGrids } from '../../../shared/calibration/wedge-layout'

const grids = Object.keys(wedgeGrids) as WedgeGrid[]

describe('a scattered wedge', () => {
  it('of 24 × 16 cells measures 168 × 112 mm and has 238 different 8-bit levels', () => {
    const { widthMm, heightMm, cells } = layoutWedge({ grid: '24x16', seed: 4711 })
    expect([widthMm, heightMm, cells.length]).toEqual([168, 112, 384])
    expect(new Set(cells.map(c => c.level)).size).toBe(238)
    expect(cells.every(c => Math.abs(c.level * 255 - Math.round(c.level * 255)) < 1e-9)).toBe(true)
  })

  it.each(grids)('%s runs from clear film to full ink and is denser at both ends', (grid) => {
    const levels = layoutWedge({ grid, seed: 1 }).cells.map(c => c.level).sort((a, b) => a - b)
    expect([levels[0], levels.at(-1)]).toEqual([0, 1])
    const within = (from: number, to: number): number => levels.filter(l => l >= from && l < to).length
    expect(within(0, 0.1)).toBeGreaterThan(1.2 * within(0.45, 0.55))
    expect(within(0.9, 1.01)).toBeGreaterThan(1.2 * within(0.45, 0.55))
  })

  it.each(grids)('%s is a complete coarse wedge in every block of 8 × 4', (grid) => {
    const { cells, columns, rows } = layoutWedge({ grid, seed: 9 })
    for (let top = 0; top < rows; top += 4) {
      for (let left = 0; left < columns; left += 8) {
        const levels = cells.filter(c => c.row >= top && c.row < top + 4 && c.column >= left && c.column < left + 8).map(c => c.level).sort((a, b) => a - b)
        expect(levels).toHaveLength(32)
        const gaps = levels.slice(1).map((l, i) => l - levels[i]!)
        // A 32nd of the axis at most π/4 + ½ times as wide in levels, and rounding.
        expect(Math.max(...gaps)).toBeLessThan((0.5 + Math.PI / 4) / 32 + 2 / 255)
        expect(levels[0]).toBeLessThan(0.03)
        expect(levels.at(-1)).toBeGreaterThan(0.97)
      }
    }
  })

  it('comes again from its record and differs with the seed', () => {
    expect(layoutWedge({ grid: '16x12', seed: 77 })).toEqual(layoutWedge({ grid: '16x12', seed: 77 }))
    expect(layoutWedge({ grid: '16x12', seed: 77 }).cells).not.toEqual(layoutWedge({ grid: '16x12', seed: 78 }).cells)
    // The wedge of a stored record must never change: the first cells of one, kept here as they came out first.
    expect(layoutWedge({ grid: '24x16', seed: 4711 }).cells.slice(0, 8).map(c => Math.round(c.level * 255))).toEqual([228, 59, 169, 35, 128, 4, 188, 138])
  })

  it.each(grids)('%s hardly follows the position, far less than one in order', (grid) => {
    const { cells } = layoutWedge({ grid, seed: 5 })
    const scattered = imbalance(Float64Array.from(cells, c => c.level), cells)
    const inOrder = imbalance(Float64Array.from(cells, c => c.level).sort(), cells)
    expect(scattered).toBeLessThan(grid === '16x12' ? 0.06 : 0.02)
    expect(inOrder).toBeGreaterThan(0.5)
  })

  it('names each cell\'s place', () => {
    const { cells } = layoutWedge({ grid: '24x16', seed: 1 })
    expect(cells[0]).toMatchObject({ column: 0, row: 0, xMm: 0, yMm: 0, x: -23 / 24, y: -15 / 16 })
    expect(cells[25]).toMatchObject({ column: 1, row: 1, xMm: 7, yMm: 7 })
    expect(cells[383]).toMatchObject({ column: 23, row: 15, xMm: 161, yMm: 105, y: 15 / 16 })
    expect(cells[383]!.x).toBeCloseTo(23 / 24, 15)
  })

  it('is refused for a damaged record', () => {
    for (const record of [{ grid: '10x10' as WedgeGrid, seed: 1 }, { grid: '24x16' as const, seed: 1.5 }, { grid: '24x16' as const, seed: Number.NaN }, { grid: 'toString' as WedgeGrid, seed: 1 }])
      expect(() => layoutWedge(record)).toThrowError(expect.objectContaining({ code: 'invalid_input' }))
  })
})

describe('the van der Corput sequence', () => {
  it('mirrors binary digits', () => {
    // By hand: ½, ¼, ¾, ⅛, ⅝, ⅜, ⅞.
    expect(Array.from({ length: 8 }, (_, i) => vanDerCorput(i))).toEqual([0, 0.5, 0.25, 0.75, 0.125, 0.625, 0.375, 0.875])
  })
})
