import { describe, expect, it } from 'vitest'
import { countPrints, defaultPool, poolDots, poolEntries, readingText, withEntry, type PoolReading } from '../../../utils/pool'

const patch = (level: number, lightness: number | null, used = true) => ({ level, lightness, lab: null, deviation: null, used })
const reading = (id: string, fields: Partial<PoolReading> = {}): PoolReading => ({
  id, state: 'ready', quality: 'scan', wedgePrintId: null, printNumber: null, createdAt: '2026-06-01T10:00:00Z', patches: [patch(0, 22), patch(1, 95)], warnings: [], unit: null, zero: null,
  progress: 1, error: null, evidence: null, ...fields,
})

/** Newest first, as the service lists them. */
const readings = [
  reading('phone-3', { quality: 'phone', wedgePrintId: 'c', printNumber: 3 }),
  reading('scan-2b', { wedgePrintId: 'b', printNumber: 2 }),
  reading('typed', { quality: 'measured' }),
  reading('scan-2a', { wedgePrintId: 'b', printNumber: 2 }),
  reading('scan-1', { wedgePrintId: 'a', printNumber: 1 }),
]

describe('readings pooled by wedge print', () => {
  it('are one sample for each wedge print, however often it was scanned', () => {
    const entries = poolEntries(readings)
    expect(entries.map(e => e.readings.map(r => r.id))).toEqual([['phone-3'], ['typed'], ['scan-2b', 'scan-2a'], ['scan-1']])
    expect(countPrints(entries, ['scan-2a', 'scan-2b', 'scan-1'])).toBe(2)
  })

  it('leave phone readings out beside others, and take them where there is nothing else', () => {
    expect(defaultPool(poolEntries(readings)).sort()).toEqual(['scan-1', 'scan-2a', 'scan-2b', 'typed'])
    expect(defaultPool(poolEntries(readings.slice(0, 1)))).toEqual(['phone-3'])
  })

  it('part the phone’s reading of a print from its scans', () => {
    const mixed = [reading('phone', { quality: 'phone', wedgePrintId: 'a' }), reading('scan', { wedgePrintId: 'a' })]
    expect(defaultPool(poolEntries(mixed))).toEqual(['scan'])
  })

  it('take in nothing that is not read yet', () => {
    const entries = poolEntries([reading('waiting', { state: 'making', patches: [] }), ...readings])
    expect(defaultPool(entries)).not.toContain('waiting')
    expect(withEntry([], entries[0]!, true)).toEqual([])
  })

  it('go in and out as whole prints', () => {
    const entries = poolEntries(readings)
    expect(withEntry(['scan-1', 'scan-2a', 'scan-2b'], entries[2]!, false)).toEqual(['scan-1'])
    expect(withEntry(['scan-1'], entries[2]!, true).sort()).toEqual(['scan-1', 'scan-2a', 'scan-2b'])
  })

  it('keep their shapes when a newer print comes', () => {
    const before = poolEntries(readings.slice(1))
    const after = poolEntries(readings)
    for (const entry of before) expect(after.find(e => e.key === entry.key)!.mark).toBe(entry.mark)
    expect(new Set(after.map(e => e.mark)).size).toBe(4)
  })
})

it('the patches of a curve’s readings stand in their prints’ shapes, without those left out of the fit', () => {
  const entries = poolEntries([reading('b', { patches: [patch(0, 20), patch(0.5, 99, false), patch(1, 95)] }), reading('a')])
  expect(poolDots(entries, ['b'])).toEqual([{ mark: 'triangle', points: [{ x: 0, y: 20 }, { x: 100, y: 95 }] }])
})

it('a reading says how many of its patches were read, their range and how they were measured', () => {
  const write = (value: number) => value.toFixed(1)
  expect(readingText(reading('a', { patches: [patch(0, 22.44), patch(0.5, null), patch(1, 95)] }), write)).toBe('2 of 3 patches, L* 22.4 to 95.0')
  expect(readingText(reading('a', { unit: 'density', zero: 'paper' }), write)).toBe('2 patches, L* 22.0 to 95.0, measured as density above paper')
})
