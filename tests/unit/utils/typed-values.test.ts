import { describe, expect, it } from 'vitest'
import { evenRows, readTypedRows } from '../../../utils/typed-values'

describe('readTypedRows', () => {
  it('makes levels of per cent and accepts decimal commas', () => {
    const typed = readTypedRows([{ ink: '0', value: '22,45' }, { ink: '52,5 %', value: '60.1' }, { ink: '100', value: '94,9' }])
    expect(typed.problems).toEqual([])
    expect(typed.values).toEqual([{ level: 0, value: 22.45 }, { level: 0.525, value: 60.1 }, { level: 1, value: 94.9 }])
  })

  it('takes levels that all lie within 0 to 1 as they are', () => {
    const typed = readTypedRows([{ ink: '0', value: '22' }, { ink: '0,5', value: '60' }, { ink: '1', value: '95' }])
    expect(typed.inkScale).toBe(1)
    expect(typed.values.map(v => v.level)).toEqual([0, 0.5, 1])
  })

  it('passes over empty rows and names the field that is missing', () => {
    const typed = readTypedRows([{ ink: '', value: ' ' }, { ink: '50', value: '' }, { ink: 'half', value: '40' }])
    expect(typed.values).toEqual([])
    expect(typed.problems).toEqual([
      { row: 1, field: 'value', message: 'Fill in the value.' },
      { row: 2, field: 'ink', message: '“half” is not a number.' },
    ])
  })

  it('refuses more than full ink', () => {
    expect(readTypedRows([{ ink: '104', value: '95' }, { ink: '5', value: '30' }]).problems).toEqual([{ row: 0, field: 'ink', message: 'Ink lies between 0 and 100 %.' }])
  })

  it('lays out an even wedge from clear film to full ink', () => {
    expect(evenRows(5).map(row => row.ink)).toEqual(['0', '25', '50', '75', '100'])
    expect(evenRows(31)[1]!.ink).toBe('3.33')
  })
})
