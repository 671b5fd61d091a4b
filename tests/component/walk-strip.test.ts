import { mountSuspended } from '@nuxt/test-utils/runtime'
import { expect, it } from 'vitest'
import WalkStrip from '../../components/calibrate/WalkStrip.vue'
import type { Walk, WalkStep } from '../../shared/schemas/calibration'
import { walkSteps } from '../../shared/schemas/calibration'

const walk = (states: Partial<Record<WalkStep, 'done' | 'skipped'>>, now: WalkStep | null): Walk => ({
  benchId: '018f0000-0000-7000-8000-000000000001', now,
  steps: walkSteps.map(step => ({ step, state: states[step] ?? 'open', optional: step === 'ink-trial', clock: null, notes: '', changedAt: null, revision: 0 })),
})
const to = (step: WalkStep) => `/s/rope-works/benches/b/calibrate?step=${step}`

it('shows the nine steps in the order of the work, each a link that says how it stands', async () => {
  const strip = await mountSuspended(WalkStrip, { props: { walk: walk({ 'path': 'done', 'ink-load': 'skipped' }, 'base-exposure'), to } })
  const links = strip.findAll('a')
  expect(links.map(link => link.text())).toEqual([
    'path, done', 'ink load, skipped', 'base exposure, to do', 'ink trial, when wanted', 'wedge on film, to do', 'wedge print, to do', 'read, to do', 'curve, to do', 'a real picture, to do',
  ])
  expect(links[4]!.attributes('href')).toBe('/s/rope-works/benches/b/calibrate?step=wedge')
})

it('marks the step that is shown, else the one to take up', async () => {
  const strip = await mountSuspended(WalkStrip, { props: { walk: walk({}, 'path'), to } })
  expect(strip.get('[aria-current=step]').text()).toMatch(/^path/)
  await strip.setProps({ shown: 'curve' })
  expect(strip.findAll('[aria-current=step]').map(link => link.text())).toEqual(['curve, to do'])
})
