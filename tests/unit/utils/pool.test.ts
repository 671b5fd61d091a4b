import { describe, expect, it } from 'vitest'
import { valueInChannel } from '../../../utils/curve-chart'
import { countPrints, defaultPool, poolDots, poolEntries, readingText, withEntry, type PoolReading } from '../../../utils/pool'

const patch = (level: number, lightness: number | null, used = true) => ({ level, lightness, lab: null, deviation: null, used })
const reading = (id: string, fields: Partial<PoolReading> = {}): PoolReading => ({
  id, state: 'ready', quality: 'scan', wedgeId: null, wedgePrintId: null, printNumber: null, createdAt: '2026-06-01T10:00:00Z', patches: [patch(0, 22), patch(1, 95)], warnings: [], unit: null, zero: null,
  progress: 1, error: null, evidence: null, ...fields,
})

/** Newest first, as the service lists them. */
const wedges = [{ id: 'w', kind: 'scattered' as const, code: '7K4Q2' }, { id: 'n', kind: 'numbered' as const, code: '9M3XW' }, { id: 'g', kind: 'exposure-strip' as const, code: '2H8TP' }]
const readings = [
  reading('phone-3', { quality: 'phone', wedgeId: 'w', wedgePrintId: 'c', printNumber: 3 }),
  reading('scan-2b', { wedgeId: 'w', wedgePrintId: 'b', printNumber: 2 }),
  reading('typed', { quality: 'measured' }),
  reading('scan-2a', { wedgeId: 'w', wedgePrintId: 'b', printNumber: 2 }),
  reading('scan-1', { wedgeId: 'w', wedgePrintId: 'a', printNumber: 1 }),
]

describe('readings pooled by wedge print', () => {
  it('are one sample for each wedge print, however often it was scanned', () => {
    const entries = poolEntries(readings, wedges)
    expect(entries.map(e => e.readings.map(r => r.id))).toEqual([['phone-3'], ['typed'], ['scan-2b', 'scan-2a'], ['scan-1']])
    expect(countPrints(entries, ['scan-2a', 'scan-2b', 'scan-1'])).toBe(2)
  })

  it('leave phone readings out beside others, and take them where there is nothing else', () => {
    expect(defaultPool(poolEntries(readings, wedges)).sort()).toEqual(['scan-1', 'scan-2a', 'scan-2b'])
    expect(defaultPool(poolEntries(readings.slice(0, 1), wedges))).toEqual(['phone-3'])
  })

  it('part the phone’s reading of a print from its scans', () => {
    const mixed = [reading('phone', { quality: 'phone', wedgeId: 'w', wedgePrintId: 'a' }), reading('scan', { wedgeId: 'w', wedgePrintId: 'a' })]
    expect(defaultPool(poolEntries(mixed, wedges))).toEqual(['scan'])
  })

  it('take in nothing that is not read yet', () => {
    const entries = poolEntries([reading('waiting', { state: 'making', patches: [] }), ...readings], wedges)
    expect(defaultPool(entries)).not.toContain('waiting')
    expect(withEntry([], entries[0]!, true, entries)).toEqual([])
  })

  it('go in and out as whole prints', () => {
    const entries = poolEntries(readings, wedges)
    expect(withEntry(['scan-1', 'scan-2a', 'scan-2b'], entries[2]!, false, entries)).toEqual(['scan-1'])
    expect(withEntry(['scan-1'], entries[2]!, true, entries).sort()).toEqual(['scan-1', 'scan-2a', 'scan-2b'])
  })

  it('are of one kind: values without places make room for scattered wedges, and the reverse', () => {
    const entries = poolEntries([...readings, reading('numbered', { wedgeId: 'n', wedgePrintId: 'd', printNumber: 1 })], wedges)
    const typed = entries.find(entry => entry.readings[0]!.id === 'typed')!
    expect(withEntry(['scan-1', 'numbered'], typed, true, entries).sort()).toEqual(['numbered', 'typed'])
    expect(withEntry(['typed', 'numbered'], entries.find(entry => entry.key === 'a')!, true, entries)).toEqual(['scan-1'])
    expect(defaultPool(entries.filter(entry => !entry.isScattered)).sort()).toEqual(['numbered', 'typed'])
  })

  it('hold no guides of other steps', () => {
    expect(poolEntries([...readings, reading('strip', { wedgeId: 'g', wedgePrintId: 'e' })], wedges).some(entry => entry.key === 'e')).toBe(false)
  })

  it('keep their shapes when a newer print comes', () => {
    const before = poolEntries(readings.slice(1), wedges)
    const after = poolEntries(readings, wedges)
    for (const entry of before) expect(after.find(e => e.key === entry.key)!.mark).toBe(entry.mark)
    expect(new Set(after.map(e => e.mark)).size).toBe(4)
  })
})

it('the patches of a curve’s readings stand in their prints’ shapes, without those left out of the fit', () => {
  const entries = poolEntries([reading('b', { patches: [patch(0, 20), patch(0.5, 99, false), patch(1, 95)] }), reading('a')], wedges)
  expect(poolDots(entries, ['b'])).toEqual([{ mark: 'triangle', points: [{ x: 0, y: 20 }, { x: 100, y: 95 }] }])
})

it('patches stand in the bench’s reading channel, and are left out where it asks for a colour that was not read', () => {
  const entries = poolEntries([reading('b', { patches: [{ ...patch(0, 20), lab: [20, 0, 0] }, patch(1, 95)] })])
  const path: [number, number, number][] = [[100, 0, 0], [0, 0, 0]]
  expect(poolDots(entries, ['b'], valueInChannel('colour-path', path))[0]!.points).toEqual([{ x: 0, y: expect.closeTo(20, 9) }])
  expect(poolDots(entries, ['b'], valueInChannel('lightness', null))[0]!.points).toHaveLength(2)
})

it('a reading says how many of its patches were read, their range and how they were measured', () => {
  const write = (value: number) => value.toFixed(1)
  expect(readingText(reading('a', { patches: [patch(0, 22.44), patch(0.5, null), patch(1, 95)] }), write)).toBe('2 of 3 patches, L* 22.4 to 95.0')
  expect(readingText(reading('a', { unit: 'density', zero: 'paper' }), write)).toBe('2 patches, L* 22.0 to 95.0, measured as density above paper')
})
