import { mountSuspended } from '@nuxt/test-utils/runtime'
import { describe, expect, it } from 'vitest'
import WedgeProgress from '../../components/ui/WedgeProgress.vue'

const cellsAt = async (value: number, steps = 10) => (await mountSuspended(WedgeProgress, { props: { value, steps, label: 'Sending' } })).findAll('i').map(cell => cell.classes()[0])

describe('WedgeProgress', () => {
  it.each([
    [0, ['off', 'off', 'off', 'off']],
    [0.25, ['on', 'off', 'off', 'off']],
    [0.3, ['on', 'at', 'off', 'off']],
    [0.75, ['on', 'on', 'on', 'off']],
    [1, ['on', 'on', 'on', 'on']],
    [1.7, ['on', 'on', 'on', 'on']],
    [-1, ['off', 'off', 'off', 'off']],
  ])('at %d fills %j', async (value, cells) => {
    expect(await cellsAt(value, 4)).toEqual(cells)
  })

  it('fills whole cells at tenths, whatever their sum in floating point', async () => {
    expect((await cellsAt(0.1 + 0.2)).filter(cell => cell === 'on')).toHaveLength(3)
  })

  it('tells the share as a progress bar with a name', async () => {
    const bar = await mountSuspended(WedgeProgress, { props: { value: 0.426, label: 'Making the film' } })
    const { role, 'aria-label': name, 'aria-valuenow': now } = bar.get('.wedge').attributes()
    expect({ role, name, now }).toEqual({ role: 'progressbar', name: 'Making the film', now: '43' })
  })
})
