import { describe, expect, it } from 'vitest'
import { bandsMm } from '#shared/calibration/wedge/frame'
import { numberedLevels, numberedPage } from '#shared/calibration/wedge/numbered-page'
import type { RectMm, WedgePage } from '#shared/calibration/wedge/page'
import { gridForSheet, scatteredGrids, scatteredPage } from '#shared/calibration/wedge/scattered-page'
import { sheetFor } from '#shared/calibration/wedge/sheet'
import { snapWedgePage } from '#shared/calibration/wedge/snap'

const pages: [string, WedgePage][] = [
  ...scatteredGrids.map((grid): [string, WedgePage] => [`${grid.columns} × ${grid.rows}`, scatteredPage(grid)]),
  ['21 steps', numberedPage(21)], ['31 steps', numberedPage(31)],
]

/** Everything that is inked or read inside the film, with its name. */
function partsOf(page: WedgePage): [string, RectMm][] {
  return [
    ...page.patches.map((patch, i): [string, RectMm] => [`patch ${i}`, patch]),
    ...page.markers.flatMap((m): [string, RectMm][] => [[`marker ${m.id}`, m.place], [`ink beside ${m.id}`, m.fullInk], [`clear beside ${m.id}`, m.clear]]),
    ...page.islands.map((island, i): [string, RectMm] => [`island ${i}`, island.pad]),
    ['code', page.identity.pad], ['write-in', page.writeIn], ['foil', page.diagnostics.foil],
    ...page.rulers.map((ruler, i): [string, RectMm] => [`ruler ${i}`, ruler.place]),
    ...page.labels.filter(label => label.ink === 'full').map((label): [string, RectMm] => [`label ${label.id}`, label.place]),
  ]
}

const overlap = (a: RectMm, b: RectMm): boolean => {
  const slack = 1e-9
  return a.xMm + a.widthMm > b.xMm + slack && b.xMm + b.widthMm > a.xMm + slack && a.yMm + a.heightMm > b.yMm + slack && b.yMm + b.heightMm > a.yMm + slack
}

describe.each(pages)('the page of %s', (_, page) => {
  it('keeps every part on the film', () => {
    for (const [name, r] of partsOf(page)) {
      expect(r.xMm >= 0 && r.yMm >= 0 && r.xMm + r.widthMm <= page.widthMm + 1e-9 && r.yMm + r.heightMm <= page.heightMm + 1e-9, name).toBe(true)
    }
  })

  it('lets no two parts overlap', () => {
    const parts = partsOf(page)
    const clashes = parts.flatMap(([a, r], i) => parts.slice(i + 1).filter(([, s]) => overlap(r, s)).map(([b]) => `${a} / ${b}`))
    expect(clashes).toEqual([])
  })

  it('leaves at least a marker’s module of bare film around each marker', () => {
    const others = partsOf(page)
    for (const { id, place } of page.markers) {
      const around = { xMm: place.xMm - 1, yMm: place.yMm - 1, widthMm: place.widthMm + 2, heightMm: place.heightMm + 2 }
      expect(others.filter(([name, r]) => name !== `marker ${id}` && !name.startsWith('clear') && overlap(around, r)).map(([name]) => name), `marker ${id}`).toEqual([])
    }
  })

  it('has its corner markers in the corners, each marker once, and none further than 52 mm from the next along a border', () => {
    const ids = page.markers.map(m => m.id)
    expect(new Set(ids).size).toBe(ids.length)
    expect(ids.slice(0, 4)).toEqual([0, 1, 2, 3])
    const [a, b, c, d] = page.markers.map(m => m.place) as [RectMm, RectMm, RectMm, RectMm]
    expect(a.xMm < b.xMm && a.yMm < d.yMm && b.xMm === c.xMm && c.yMm === d.yMm).toBe(true)
    const top = page.markers.filter(m => m.place.yMm === a.yMm).map(m => m.place.xMm).sort((x, y) => x - y)
    expect(Math.max(...top.slice(1).map((x, i) => x - top[i]!))).toBeLessThanOrEqual(52)
  })

  it('gives the code at least 20 mm', () => {
    expect(Math.min(page.identity.symbol.widthMm, page.identity.symbol.heightMm)).toBeGreaterThanOrEqual(20)
  })

  it('moves by at most half a pixel when laid on a film’s pixels', () => {
    for (const ppi of [300, 360, 600]) {
      const before = partsOf(page)
      for (const [i, [name, r]] of partsOf(snapWedgePage(page, ppi)).entries()) {
        const miss = Math.max(Math.abs(r.xMm - before[i]![1].xMm), Math.abs(r.yMm + r.heightMm - before[i]![1].yMm - before[i]![1].heightMm))
        expect(miss, name).toBeLessThanOrEqual(25.4 / ppi / 2 + 1e-9)
        expect(Math.abs(r.xMm * ppi / 25.4 - Math.round(r.xMm * ppi / 25.4)), name).toBeLessThan(1e-6)
      }
    }
  })
})

describe('sizes', () => {
  it('fits 24 × 16 cells of 7 mm on 200 × 138 mm', () => {
    const page = scatteredPage({ columns: 24, rows: 16 })
    expect([page.widthMm, page.heightMm, page.patches.length]).toEqual([200, 138, 384])
    expect(page.field).toEqual({ xMm: bandsMm.left, yMm: bandsMm.top, widthMm: 168, heightMm: 112 })
  })

  it.each([
    [210, 297, 24, 24], [297, 210, 24, 24], [215.9, 279.4, 24, 24], [210, 148.5, 24, 16], [200, 138, 24, 16], [127, 178, 16, 12],
    [203.2, 254, 24, 24], [203, 198, 16, 12], [145, 111, 16, 12],
  ])('chooses for a sheet of %d × %d mm the grid of %d × %d', (width, height, columns, rows) => {
    expect(gridForSheet(width, height)).toEqual({ columns, rows })
  })

  it('lays a sheet the way round that leaves an inkjet its margin', () => {
    const page = scatteredPage({ columns: 24, rows: 16 })
    expect(sheetFor(page, { widthMm: 210, heightMm: 297 })).toEqual({ widthMm: 210, heightMm: 297 })
    expect(sheetFor(page, { widthMm: 203.2, heightMm: 254 })).toEqual({ widthMm: 254, heightMm: 203.2 })
    expect(sheetFor(page, { widthMm: 138, heightMm: 200 })).toEqual({ widthMm: 200, heightMm: 138 })
    expect(() => sheetFor(page, { widthMm: 199, heightMm: 150 })).toThrow(/takes 200 × 138 mm/)
  })

  it('refuses a sheet that no wedge fits, naming the least size', () => {
    expect(() => gridForSheet(100, 150)).toThrow(/144 × 110/)
  })
})

describe.each([21, 31] as const)('a numbered wedge of %d steps', (steps) => {
  it('has steps of at least 12 mm, twice, in opposite order', () => {
    const page = numberedPage(steps)
    expect(page.patches).toHaveLength(2 * steps)
    expect(Math.min(...page.patches.map(p => Math.min(p.widthMm, p.heightMm)))).toBeGreaterThanOrEqual(12)
    const levels = numberedLevels(steps)
    expect(levels.slice(0, steps)).toEqual(levels.slice(steps).reverse())
    expect([levels[0], levels[steps - 1]]).toEqual([0, 1])
    expect(page.labels.filter(l => l.id.startsWith('step-')).map(l => Number(l.text))).toEqual([...Array(steps).keys()].map(i => i + 1).concat([...Array(steps).keys()].map(i => steps - i)))
  })
})
