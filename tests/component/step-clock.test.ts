import { mountSuspended } from '@nuxt/test-utils/runtime'
import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest'
import { nextTick } from 'vue'
import StepClock from '../../components/calibrate/StepClock.vue'

const startedAt = '2026-06-02T10:00:00.000Z'
const clock = { startedAt, seconds: 1800, endsAt: '2026-06-02T10:30:00.000Z' }
const waitings = [{ label: 'The film is out of the inkjet', seconds: 1800 }]
const mount = (props: object) => mountSuspended(StepClock, { props: { clock, waitings, mayChange: true, ...props } })

describe('StepClock', () => {
  beforeEach(() => {
    vi.useFakeTimers({ toFake: ['Date', 'setInterval', 'clearInterval'] })
    vi.setSystemTime(Date.parse(startedAt) + 10 * 60_000)
  })
  afterEach(() => vi.useRealTimers())

  it('counts from the instants that the studio keeps, so a page opened late shows what is left', async () => {
    const shown = await mount({})
    expect(shown.get('[role=timer]').text()).toBe('20 minleft')
    expect(shown.get('[role=progressbar]').attributes('aria-valuenow')).toBe('33')
  })

  it('goes on while it stands, and says once when the time is over', async () => {
    const shown = await mount({})
    expect(shown.get('[role=status]').text()).toBe('')
    vi.advanceTimersByTime(20 * 60_000)
    await nextTick()
    expect(shown.get('[role=timer]').text()).toBe('Dry')
    expect(shown.get('[role=status]').text()).toBe('The time is over.')
  })

  it('offers to start where no clock runs, and tells for how long', async () => {
    const shown = await mount({ clock: null })
    await shown.get('button').trigger('click')
    expect(shown.emitted('start')).toEqual([[1800]])
  })

  it('is only to be read for who may not change it', async () => {
    const shown = await mount({ mayChange: false })
    expect(shown.findAll('button')).toHaveLength(0)
  })
})
