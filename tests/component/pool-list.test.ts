import { mountSuspended } from '@nuxt/test-utils/runtime'
import { describe, expect, it } from 'vitest'
import PoolList from '../../components/curves/PoolList.vue'
import { defaultPool, poolEntries, type PoolReading } from '../../utils/pool'

const reading = (id: string, fields: Partial<PoolReading>): PoolReading => ({
  id, state: 'ready', quality: 'scan', wedgeId: 'w', wedgePrintId: null, printNumber: null, createdAt: '2020-06-01T10:00:00Z', warnings: [], unit: null, zero: null, progress: 1, error: null, evidence: null,
  patches: [{ level: 0, lightness: 22, lab: null, deviation: null, used: true }, { level: 1, lightness: 95, lab: null, deviation: null, used: true }], ...fields,
})
const entries = poolEntries([
  reading('phone', { quality: 'phone', wedgePrintId: 'b', printNumber: 2 }),
  reading('second-scan', { wedgePrintId: 'a', printNumber: 1 }),
  reading('scan', { wedgePrintId: 'a', printNumber: 1 }),
  reading('blurred', { wedgePrintId: 'c', printNumber: 3, state: 'failed', patches: [], error: { code: 'blurred', message: 'The picture is not sharp. Scan it again, flat on the glass.' } }),
], [{ id: 'w', kind: 'scattered', code: '7K4Q2' }])

describe('PoolList', () => {
  it('ticks prints, not scans; leaves the phone’s reading off and says why', async () => {
    const list = await mountSuspended(PoolList, { props: { entries, mayChoose: true, chosen: defaultPool(entries) } })
    const boxes = list.findAll('input')
    expect(boxes.map(box => [box.element.closest('label')!.textContent!.trim(), box.element.checked])).toEqual([['Wedge print 2, by phone', false], ['Wedge print 1', true]])
    expect(list.text()).toContain('Two scans of this print count as one.')
    expect(list.text()).toContain('It goes into a curve only when you say so.')
    expect(list.text()).toContain('The picture is not sharp. Scan it again, flat on the glass.')
    await boxes[1]!.setValue(false)
    expect(list.emitted('update:chosen')![0]).toEqual([[]])
    await boxes[0]!.setValue(true)
    expect((list.emitted('update:chosen')![1]![0] as string[])).toContain('phone')
  })

  it('shows a member what was read, without boxes', async () => {
    const list = await mountSuspended(PoolList, { props: { entries, mayChoose: false, chosen: [] } })
    expect(list.findAll('input')).toHaveLength(0)
    expect(list.text()).toContain('2 patches, L* 22.0 to 95.0')
  })
})
