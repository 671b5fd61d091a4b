import { describe, expect, it } from 'vitest'
import { evenStrip, lightnessOf, stripColumns } from '../../../utils/exposure-strip'
import { pastedCells, readFigureRows, withPasted } from '../../../utils/figure-rows'

const columns = stripColumns('s', 'lightness')

describe('a strip typed in', () => {
  it('has ten steps, half a stop apart', () => {
    // derived: 30 s · 2^(i/2)
    expect(evenStrip(30, 's').map(row => row.exposure)).toEqual(['30 s', '42 s', '1 min', '1 min 25 s', '2 min', '2 min 50 s', '4 min', '5 min 39 s', '8 min', '11 min 19 s'])
  })

  it('is read with times and decimal commas; rows without a measured value are passed over', () => {
    const rows = [{ exposure: '1 min 30 s', first: '42,5', second: '' }, { exposure: '2 min', first: '', second: '' }, { exposure: '4:00', first: '30', second: '31.5' }]
    expect(readFigureRows(rows, columns, ['first', 'second'])).toEqual({ problems: [], values: [{ row: 0, exposure: 90, first: 42.5, second: null }, { row: 2, exposure: 240, first: 30, second: 31.5 }] })
  })

  it('says which field needs another look, and leaves that row out', () => {
    const { values, problems } = readFigureRows([{ exposure: 'soon', first: '42', second: '' }, { exposure: '30 s', first: '420', second: '' }], columns, ['first', 'second'])
    expect(values).toEqual([])
    expect(problems).toEqual([{ row: 0, key: 'exposure', message: 'Write a figure, such as 1 min 30 s.' }, { row: 1, key: 'first', message: 'From 0 to 100.' }])
  })

  it('takes densities, too', () => {
    // CIE 15:2004, 8.2.1: Y = 0.1 (density 1) is L* 37.84
    expect(lightnessOf(1, 'density')).toBeCloseTo(37.84, 2)
    expect(lightnessOf(42, 'lightness')).toBe(42)
  })
})

describe('what is pasted', () => {
  const rows = evenStrip(30, 's', 2)
  it('fills on from the field it lands in', () => {
    expect(withPasted(rows, ['exposure', 'first', 'second'], 0, 'first', pastedCells('80,1\t79\r\n70\t71\n'), false).map(row => [row.first, row.second])).toEqual([['80,1', '79'], ['70', '71']])
  })

  it('adds rows only where they may be added', () => {
    const cells = pastedCells('1\n2\n3')
    expect(withPasted(rows, ['exposure', 'first', 'second'], 0, 'first', cells, false)).toHaveLength(2)
    expect(withPasted(rows, ['exposure', 'first', 'second'], 0, 'first', cells, true)[2]).toEqual({ exposure: '', first: '3', second: '' })
  })
})
