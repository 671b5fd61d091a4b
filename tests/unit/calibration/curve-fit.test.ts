import { describe, expect, it } from 'vitest'
import type { CurveReading } from '../../../shared/calibration/curve-fit'
import { fitCurve } from '../../../shared/calibration/curve-fit'
import { seededRandom } from '../../../shared/calibration/random'
import { chartOf } from '../../../shared/calibration/wedge/chart'
import { cellPlacesOf, layoutWedge } from '../../../shared/calibration/wedge-layout'
import { curveLevels } from '../../../shared/tone/levels'
import { printQualities } from '../../support/simulator/print'
import { drawSystem } from '../../support/simulator/system'
import { printWedge } from '../../support/simulator/wedge'

const grid = '16x12' as const
const plan = { kind: 'scattered', grid, seed: 5 } as const
const random = seededRandom(61)
const system = drawSystem(random, { exposureScaleFrom: 1.4, exposureScaleTo: 2 })
const layout = layoutWedge(plan)

/** A neutral print's reading, its patches in the wedge's order. */
function scanned(print: string, change: Partial<CurveReading> = {}, shift = 0): CurveReading {
  const patches = printWedge(system, layout, printQualities.typical, random)
    .map(({ level, lightness }) => ({ level, lightness: lightness + shift, lab: [lightness + shift, 0, 0], used: true }))
  return { print, quality: 'scan', grid, patches, places: null, isOtherPath: false, ...change }
}
const typed = (print: string): CurveReading => ({
  print, quality: 'measured', grid: null, places: null, isOtherPath: false,
  patches: Array.from({ length: 21 }, (_, i) => ({ level: i / 20, lightness: system.lightness(i / 20), lab: null, used: true })),
})
const codesOf = (readings: CurveReading[]): string[] => fitCurve(readings, 'lightness').warnings.map(w => w.code)
const first = scanned('a')

describe('the cells of a scattered wedge', () => {
  it('stand on the page in the order and at the places that the fit takes them to be', () => {
    const { page, patches } = chartOf(plan, 360)
    const places = cellPlacesOf(grid)
    const middle = { x: page.field.xMm + page.field.widthMm / 2, y: page.field.yMm + page.field.heightMm / 2 }
    expect(patches.map(p => p.level)).toEqual(layout.cells.map(c => c.level))
    for (const [i, { xMm, yMm, widthMm, heightMm }] of page.patches.entries()) {
      // Laid on a film's pixels: within two of them.
      expect(Math.abs(xMm + widthMm / 2 - middle.x - places[i]!.xMm)).toBeLessThan(0.15)
      expect(Math.abs(yMm + heightMm / 2 - middle.y - places[i]!.yMm)).toBeLessThan(0.15)
    }
  })
})

describe('readings pooled for a curve', () => {
  it('of one print, scanned twice, are one sample; of two prints they are two', () => {
    const again = { ...first, patches: [...first.patches] }
    const once = fitCurve([first], 'lightness')
    expect(fitCurve([first, again], 'lightness')).toEqual(once)
    expect(once.basis).toMatchObject({ prints: 1, printSpread: null })
    expect(fitCurve([first, scanned('b')], 'lightness').basis.prints).toBe(2)
  })

  it('give the same curve in whatever order', () => {
    const [a, b] = [first, scanned('b')]
    expect(fitCurve([b, a], 'lightness')).toEqual(fitCurve([a, b], 'lightness'))
  })

  it('leave unreadable patches out', () => {
    const patches = first.patches.map((p, i) => i % 10 === 3 ? { ...p, lightness: null, lab: null } : p)
    const { basis } = fitCurve([{ ...first, patches }], 'lightness')
    expect(basis.patchesUsed + basis.patchesDropped).toBe(192 - 19)
  })

  it('are refused when places are known of some only', () => {
    expect(() => fitCurve([first, typed('t')], 'lightness')).toThrowError(expect.objectContaining({ code: 'reading_unfit' }))
    expect(fitCurve([typed('t'), typed('u')], 'lightness').basis).toMatchObject({ prints: 2, noise: null })
  })

  it('tell from three prints on how prints differ, and less of the next print where they differ more', () => {
    const alike = fitCurve([first, scanned('b'), scanned('c')], 'lightness')
    const apart = fitCurve([first, scanned('b', {}, 3), scanned('c', {}, -3)], 'lightness')
    expect(alike.basis.printSpread).toBeGreaterThan(0)
    expect(apart.basis.printSpread!).toBeGreaterThan(alike.basis.printSpread!)
    expect(apart.expectedError.nextPrint.p95).toBeGreaterThan(alike.expectedError.nextPrint.p95)
    const { nextPrint, nextPrintWithOneMore: more } = alike.expectedError
    expect(more!.p95).toBeLessThanOrEqual(nextPrint.p95)
  })
})

describe('what a curve warns of', () => {
  const [black, white] = [system.lightness(0), system.lightness(1)]
  it('a phone’s picture, and another path', () => {
    expect(codesOf([first])).not.toContain('phone_reading')
    expect(codesOf([{ ...first, quality: 'phone', isOtherPath: true }])).toEqual(expect.arrayContaining(['phone_reading', 'other_path']))
  })

  it('clear film that is not black yet, by the bare paper beside it', () => {
    expect(codesOf([{ ...first, places: { bare: black - 0.3, foil: null, uncoated: null } }])).not.toContain('clear_film_not_black')
    expect(codesOf([{ ...first, places: { bare: black - 4, foil: null, uncoated: null } }])).toContain('clear_film_not_black')
  })

  // The trade's own trial: full ink 88 with foil 95 is ink that lets UV through; both 88 beside clean paper is a stain.
  it('full ink that is not white, and tells a leak from a stain by the foil', () => {
    expect(codesOf([{ ...first, places: { bare: null, foil: white + 7, uncoated: white + 7 } }])).toContain('full_ink_not_white')
    expect(codesOf([{ ...first, places: { bare: null, foil: white, uncoated: white + 7 } }])).toContain('stained')
    expect(codesOf([{ ...first, places: { bare: null, foil: white, uncoated: white } }]).filter(c => c === 'stained' || c === 'full_ink_not_white')).toEqual([])
  })

  it('shadows that reverse: the curve starts where they are deepest', () => {
    const dip = (level: number): number => 8 * Math.max(0, 1 - level / 0.2) ** 2
    const careful = printWedge(system, layout, printQualities.careful, seededRandom(3))
    const patches = careful.map(({ level, lightness }) => ({ level, lightness: lightness + dip(level), lab: null, used: true }))
    const { response, basis, warnings } = fitCurve([{ ...first, patches }], 'lightness')
    expect(warnings.map(w => w.code)).toContain('reversal')
    expect(curveLevels(response, 'even-lightness')[0]).toBeCloseTo(basis.reversal!.level, 3)
    expect(basis.reversal!.level).toBeGreaterThan(0.02)
  })
})
