import { mountSuspended } from '@nuxt/test-utils/runtime'
import { describe, expect, it } from 'vitest'
import GuidedEntry from '../../components/readings/GuidedEntry.vue'
import { numberedLevels, numberedPage } from '../../shared/calibration/wedge/numbered-page'
import type { Wedge } from '../../shared/schemas/wedges'
import type { TypedRow } from '../../utils/read-pasted-table'

const page = numberedPage(21)
const wedge = { page: { widthMm: page.widthMm, heightMm: page.heightMm }, patches: page.patches.map((place, i) => ({ ...place, level: numberedLevels(21)[i]! })) } as Wedge
const empty = (): TypedRow[] => wedge.patches.map(({ level }) => ({ ink: String(level * 100), value: '' }))

async function mountEntry(rows = empty()) {
  const entry = await mountSuspended(GuidedEntry, { props: { wedge, 'rows': rows, 'valueName': 'Density', 'onUpdate:rows': (next: TypedRow[]) => entry.setProps({ rows: next }) }, attachTo: document.body })
  const type = async (value: string) => {
    await entry.get('input').setValue(value)
    await entry.get('input').trigger('keydown', { key: 'Enter' })
  }
  return { entry, type, says: () => entry.get('[role=status]').text() }
}

describe('GuidedEntry', () => {
  it('goes from step to step with Enter, there and back', async () => {
    const { says, type } = await mountEntry()
    expect(says()).toBe('Step 1in the upper rows; 1 of 42')
    for (let i = 0; i < 21; i++) await type('1,2')
    expect(says()).toBe('Step 21in the lower rows; 22 of 42')
    await type('1,3')
    expect(says()).toBe('Step 20in the lower rows; 23 of 42')
  })

  it('begins where the last value was typed', async () => {
    const { says } = await mountEntry(empty().map((row, i) => i < 4 ? { ...row, value: '80' } : row))
    expect(says()).toContain('Step 5')
  })

  it('stays on a step whose value is no number, and says so', async () => {
    const { entry, says, type } = await mountEntry()
    await type('dark')
    expect(says()).toContain('Step 1')
    expect(entry.get('[role=alert]').text()).toBe('“dark” is not a number.')
  })

  it('lets a step be left out', async () => {
    const { entry, says, type } = await mountEntry()
    await type('')
    expect(says()).toContain('Step 2')
    expect(entry.text()).toContain('0 of 42 measured')
  })
})
