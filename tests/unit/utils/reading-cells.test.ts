import { describe, expect, it } from 'vitest'
import { crossesOf, outlineOf, patchRows, sayCells } from '../../../utils/reading-cells'

const patch = (level: number, lightness: number | null, used = true) => ({ level, lightness, lab: null, deviation: 0.4, used })

describe('patchRows', () => {
  it('goes by rising ink and keeps the number that a cell has in the wedge', () => {
    expect(patchRows([patch(0.5, 60), patch(0, 22), patch(0.5, 61)]).map(row => row.number)).toEqual([2, 1, 3])
  })
  it('gives the density of a lightness: L* 50 is 0.73 (CIE 1976: Y = ((50 + 16) / 116)³)', () => {
    expect(patchRows([patch(0.5, 50)])[0]!.density).toBeCloseTo(-3 * Math.log10(66 / 116), 6)
  })
  it('leaves an unreadable cell without figures', () => expect(patchRows([patch(0.5, null)])[0]).toMatchObject({ lightness: null, density: null }))
})

describe('what lies over the picture', () => {
  const cell = [0, 0, 10, 1, 11, 9, 1, 8]
  it('outlines a cell round its corners', () => expect(outlineOf([cell])).toBe('M0 0L10 1 11 9 1 8Z'))
  it('crosses it from corner to corner', () => expect(crossesOf([cell])).toBe('M0 0L11 9M10 1L1 8'))
})

it('says how many cells were read, and how many of them are left out', () => {
  expect(sayCells([patch(0, 20), patch(1, 90)])).toBe('All 2 cells were read.')
  expect(sayCells([patch(0, 20), patch(0.5, null), patch(1, 90, false)])).toBe('2 of 3 cells were read; one is left out, because something disturbs it.')
})
