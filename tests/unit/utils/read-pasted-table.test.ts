import { describe, expect, it } from 'vitest'
import { readPastedTable } from '../../../utils/read-pasted-table'

describe('readPastedTable', () => {
  it('reads two columns as a spreadsheet copies them, decimal commas kept as typed', () => {
    expect(readPastedTable('0\t22,4\r\n50\t51,0\r\n100\t94,9\r\n').rows)
      .toEqual([{ ink: '0', value: '22,4' }, { ink: '50', value: '51,0' }, { ink: '100', value: '94,9' }])
  })

  it.each([
    ['semicolons', '0,5;83,2'],
    ['spaces', '0,5   83,2'],
    ['commas around decimal commas', '0,5,83,2'],
    ['quoted cells', '"0,5"\t"83,2"'],
  ])('divides at %s', (_, line) => {
    expect(readPastedTable(line).rows).toEqual([{ ink: '0,5', value: '83,2' }])
  })

  it('divides at a comma when the numbers have points', () => {
    expect(readPastedTable('0.5,83.2').rows).toEqual([{ ink: '0.5', value: '83.2' }])
  })

  it('takes the unit from a header line and does not read it as a row', () => {
    const table = readPastedTable('level,density\n0,1.42\n1,0.08')
    expect(table.unit).toBe('density')
    expect(table.rows).toHaveLength(2)
  })

  it('knows a single column as values for levels that stand already', () => {
    const table = readPastedTable('22.4\n30,1\n44')
    expect(table.valuesOnly).toBe(true)
    expect(table.rows.map(row => row.value)).toEqual(['22.4', '30,1', '44'])
  })

  it('tells a column with decimal commas from two columns of whole numbers by the clear film at 0', () => {
    expect(readPastedTable('22,4\n30,1\n94,9').valuesOnly).toBe(true)
    expect(readPastedTable('1,42\n0,90\n0,08').valuesOnly).toBe(true)
    expect(readPastedTable('0,22\n50,51\n100,95').rows).toEqual([{ ink: '0', value: '22' }, { ink: '50', value: '51' }, { ink: '100', value: '95' }])
  })

  it('hands back the lines it cannot read instead of dropping them', () => {
    const table = readPastedTable('0\t22\nabout half\tgrey\n100\t95')
    expect(table.rows).toHaveLength(2)
    expect(table.unread).toEqual(['about half\tgrey'])
  })

  it('gives nothing for nothing', () => {
    expect(readPastedTable(' \n ')).toEqual({ rows: [], unit: null, valuesOnly: false, unread: [] })
  })
})
