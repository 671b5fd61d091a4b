import { beforeEach, describe, expect, it } from 'vitest'
import { newPersonIn } from '../support/people'
import { newStudio } from '../support/studio'
import { wedgeValues } from './routes/world'

type Studio = Awaited<ReturnType<typeof newStudio>>
let studio: Studio, root: string, bench: string

beforeEach(async () => {
  studio = await newStudio()
  const made = await studio.agent.post(`${studio.root}/benches`, { name: 'Window bench', process: 'cyanotype' })
  bench = made.body.id
  root = `${studio.root}/benches/${bench}`
})

const walk = async () => (await studio.agent.get(`${root}/walk`)).body
const stateOf = async (step: string) => (await walk()).steps.find((one: { step: string }) => one.step === step).state
const say = (step: string, json: object) => studio.agent.patch(`${root}/walk/${step}`, json)
const changeBench = (json: object) => studio.agent.patch(root, json)
const readValues = async () => (await studio.agent.post(`${root}/readings`, { unit: 'lightness', values: wedgeValues })).body.id
const fit = async (...readingIds: string[]) => (await studio.agent.post(`${root}/curves`, { readingIds })).body.id

describe('the walk through a calibration', () => {
  it('begins with the path, every step open', async () => {
    const { now, steps } = await walk()
    expect(now).toBe('path')
    expect(steps.map((one: { step: string, state: string }) => `${one.step} ${one.state}`)).toEqual(
      ['path', 'ink-load', 'base-exposure', 'ink-trial', 'wedge', 'expose', 'read', 'curve', 'check'].map(step => `${step} open`))
  })

  it('sees from the bench itself that the path and the base exposure are written down', async () => {
    await changeBench({ revision: 1, path: { fileKind: 'pdf', pixelsPerInch: 600, colourAdjustment: 'off' } })
    expect((await walk()).now).toBe('ink-load')
    await changeBench({ revision: 2, baseExposure: { value: 260, unit: 's' } })
    expect(await stateOf('base-exposure')).toBe('done')
  })

  it('goes on to the curve once something is read, and past it once a curve is in use', async () => {
    await changeBench({ revision: 1, baseExposure: { value: 260, unit: 's' } })
    const first = await readValues()
    expect((await walk()).now).toBe('curve')
    const curve = await fit(first)
    expect(await stateOf('curve')).toBe('open')
    await studio.agent.post(`${studio.root}/curves/${curve}/use`)
    expect((await walk()).now).toBe('check')
  })

  it('asks for a further curve when a reading is in none', async () => {
    await studio.agent.post(`${studio.root}/curves/${await fit(await readValues())}/use`)
    expect(await stateOf('curve')).toBe('done')
    await readValues()
    expect(await stateOf('curve')).toBe('open')
  })

  it('passes over the ink trial, which is made only when wanted', async () => {
    for (const step of ['path', 'ink-load', 'base-exposure']) await say(step, { revision: 0, state: 'skipped' })
    expect((await walk()).now).toBe('wedge')
  })

  it('lets what a person says stand before the records, and takes it back', async () => {
    await changeBench({ revision: 1, baseExposure: { value: 260, unit: 's' } })
    await say('base-exposure', { revision: 0, state: 'open' })
    expect(await stateOf('base-exposure')).toBe('open')
    await say('base-exposure', { revision: 1, state: null })
    expect(await stateOf('base-exposure')).toBe('done')
  })

  it('runs a clock that another person’s device sees end at the same instant, until it is stopped', async () => {
    const before = Date.now()
    await say('ink-load', { revision: 0, clockSeconds: 1800, notes: 'Third drawer.' })
    const technician = await newPersonIn(studio.ids.studio, 'technician')
    const { steps } = (await technician.agent.get(`${root}/walk`)).body
    const step = steps.find((one: { step: string }) => one.step === 'ink-load')
    expect(step).toMatchObject({ state: 'open', notes: 'Third drawer.', revision: 1, clock: { seconds: 1800 } })
    expect(Date.parse(step.clock.endsAt) - Date.parse(step.clock.startedAt)).toBe(1_800_000)
    expect(Date.parse(step.clock.startedAt)).toBeGreaterThanOrEqual(before - 5000)
    const stopped = await technician.agent.patch(`${root}/walk/ink-load`, { revision: 1, clockSeconds: null })
    expect(stopped.body.steps.find((one: { step: string }) => one.step === 'ink-load')).toMatchObject({ clock: null, notes: 'Third drawer.', revision: 2 })
  })

  it('refuses the second of two who change a step at once', async () => {
    const answers = await Promise.all([say('check', { revision: 0, state: 'done' }), say('check', { revision: 0, state: 'skipped' })])
    expect(answers.map(answer => answer.status).sort()).toEqual([200, 409])
  })
})
