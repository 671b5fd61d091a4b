import { v7 as uuidv7 } from 'uuid'
import { describe, expect, it } from 'vitest'
import { sql } from '../support/database'
import { newPersonIn } from '../support/people'
import { newStudio } from '../support/studio'
import { wedgeValues } from './routes/world'

const cyanotype = { name: 'Window bench', process: 'cyanotype' }
type Studio = Awaited<ReturnType<typeof newStudio>>
const newBench = async ({ agent, root }: Studio, fields = {}) => (await agent.post(`${root}/benches`, { ...cyanotype, ...fields })).body
const newReading = async ({ agent, root }: Studio, bench: string) => (await agent.post(`${root}/benches/${bench}/readings`, { unit: 'lightness', values: wedgeValues })).body

describe('a bench', () => {
  it('has a mirrored film, black ink and lightness unless told otherwise; carbon turns the picture itself', async () => {
    const studio = await newStudio()
    expect(await newBench(studio)).toMatchObject({ mirror: true, ink: { color: '#000000' }, readingChannel: 'lightness', recipe: {}, path: {}, starter: false, curveInUse: null, baseExposure: null, revision: 1 })
    expect(await newBench(studio, { process: 'carbon' })).toMatchObject({ mirror: false })
  })

  it('names things of its own studio only', async () => {
    const [studio, other] = [await newStudio(), await newStudio()]
    const { id } = (await other.agent.post(`${other.root}/papers`, { name: 'Cotton' })).body
    const answer = await studio.agent.post(`${studio.root}/benches`, { ...cyanotype, paperId: id })
    expect(answer.body).toMatchObject({ statusCode: 422, data: { code: 'invalid_input', issues: [{ path: 'paperId' }] } })
    expect((await studio.agent.get(`${studio.root}/benches`)).body.items).toEqual([])
  })

  it('changes freely until it is read; then its combination stays and a copy is offered', async () => {
    const studio = await newStudio()
    const { agent, root } = studio
    const { id } = await newBench(studio)
    const lamp = (await agent.post(`${root}/lamps`, { name: 'Eight tubes' })).body.id
    expect((await agent.patch(`${root}/benches/${id}`, { lampId: lamp, revision: 1 })).body).toMatchObject({ lampId: lamp, revision: 2 })
    expect((await agent.get(`${root}/benches/${id}`)).body.combinationFixed).toBe(false)
    await newReading(studio, id)
    expect((await agent.get(`${root}/benches/${id}`)).body.combinationFixed).toBe(true)

    const refused = await agent.patch(`${root}/benches/${id}`, { lampId: null, ink: { color: '#000000' }, revision: 2 })
    expect(refused.body).toMatchObject({ statusCode: 409, data: { code: 'combination_fixed', issues: [{ path: 'lampId' }] } })
    expect(refused.body.message).toContain(`benches/${id}/copy`)
    // What does not change the combination still goes.
    expect((await agent.patch(`${root}/benches/${id}`, { name: 'North window', lampId: lamp, recipe: {}, revision: 2 })).body).toMatchObject({ name: 'North window', revision: 3 })

    const copy = (await agent.post(`${root}/benches/${id}/copy`, { lampId: null })).body
    expect(copy).toMatchObject({ name: 'North window, copy', process: 'cyanotype', lampId: null, curveInUse: null })
    expect((await agent.get(`${root}/benches/${copy.id}/readings`)).body.items).toEqual([])
    expect((await agent.get(`${root}/benches/${id}/readings`)).body.items).toHaveLength(1)
  })

  it('stays as it is from its first wedge print on, also where nothing was read yet', async () => {
    const studio = await newStudio()
    const { agent, root } = studio
    const { id } = await newBench(studio)
    const wedge = (await agent.post(`${root}/benches/${id}/wedges`, { page: { widthMm: 210, heightMm: 297 } })).body
    expect((await agent.get(`${root}/benches/${id}`)).body.combinationFixed).toBe(false)
    await agent.post(`${root}/wedges/${wedge.id}/prints`, {})
    expect((await agent.get(`${root}/benches/${id}`)).body.combinationFixed).toBe(true)
    const refused = await agent.patch(`${root}/benches/${id}`, { recipe: { coats: 2 }, revision: 1 })
    expect(refused.body).toMatchObject({ statusCode: 409, data: { code: 'combination_fixed', issues: [{ path: 'recipe' }] } })
    expect(refused.body.message).toContain('wedge prints or readings')
  })

  it('keeps its base exposures as dated entries, the newest of which counts, also after readings', async () => {
    const studio = await newStudio()
    const { agent, root } = studio
    const { id } = await newBench(studio, { baseExposure: { value: 480, unit: 's' } })
    await newReading(studio, id)
    const changed = (await agent.patch(`${root}/benches/${id}`, { baseExposure: { value: 12.5, unit: 'dose' }, revision: 1 })).body
    expect(changed.baseExposure).toMatchObject({ value: 12.5, unit: 'dose', low: null, high: null })
    const { items } = (await agent.get(`${root}/benches/${id}/base-exposures`)).body
    expect(items).toMatchObject([{ value: 12.5, unit: 'dose', exposureSeconds: null }, { value: 480, unit: 's', exposureSeconds: 480 }])
  })

  it('that is put away takes no more readings, and leaves the list', async () => {
    const studio = await newStudio()
    const { agent, root } = studio
    const { id } = await newBench(studio)
    expect((await agent.post(`${root}/benches/${id}/archive`, { revision: 1 })).body.archivedAt).not.toBeNull()
    expect((await agent.post(`${root}/benches/${id}/readings`, { unit: 'lightness', values: wedgeValues })).body.data.code).toBe('wrong_state')
    expect((await agent.get(`${root}/benches`)).body.items).toEqual([])
    expect((await agent.get(`${root}/benches?archived=true`)).body.items).toHaveLength(1)
  })

  it('changed by two people at the same revision takes one change and tells the other', async () => {
    const studio = await newStudio()
    const { id } = await newBench(studio)
    const answers = await Promise.all(['East', 'West', 'South'].map(name => studio.agent.patch(`${studio.root}/benches/${id}`, { name, revision: 1 })))
    expect(answers.map(a => a.status).sort()).toEqual([200, 409, 409])
    expect(answers.filter(a => a.status === 409).map(a => a.body.data.code)).toEqual(['stale_revision', 'stale_revision'])
  })

  it('asked for many times with one id is made once', async () => {
    const { agent, root } = await newStudio()
    const id = uuidv7()
    const answers = await Promise.all(Array.from({ length: 5 }, () => agent.post(`${root}/benches`, { id, ...cyanotype, baseExposure: { value: 100, unit: 's' } })))
    expect(answers.map(a => a.status).sort()).toEqual([200, 200, 200, 200, 201])
    expect(new Set(answers.map(a => a.text)).size).toBe(1)
    expect((await agent.post(`${root}/benches`, { id, ...cyanotype, name: 'Other' })).body.data.code).toBe('id_taken')
    expect((await agent.get(`${root}/benches/${id}/base-exposures`)).body.items).toHaveLength(1)
  })
})

describe('a starter bench', () => {
  it('is made once for a process, however many ask, with an uncalibrated curve in use', async () => {
    const studio = await newStudio()
    const member = await newPersonIn(studio.ids.studio, 'member')
    const answers = await Promise.all([member, studio, member, studio, member].map(({ agent }) => agent.post(`${studio.root}/starter-benches`, { process: 'cyanotype' })))
    expect(answers.map(a => a.status).sort()).toEqual([200, 200, 200, 200, 201])
    expect(new Set(answers.map(a => a.body.id)).size).toBe(1)
    const bench = answers[0]!.body
    expect(bench).toMatchObject({ starter: true, process: 'cyanotype', curveInUse: { version: 1, calibrated: false } })
    expect(bench.assumptions.join(' ')).toMatch(/uncalibrated/i)
    expect(await sql('select 1 from curves where studio_id = $1', [studio.ids.studio])).toHaveLength(1)
  })

  it.each(['carbon', 'other'])('does not exist for %s', async (process) => {
    const { agent, root } = await newStudio()
    expect((await agent.post(`${root}/starter-benches`, { process })).body.data.code).toBe('no_starter_curve')
    expect((await agent.get(`${root}/benches`)).body.items).toEqual([])
  })

  it('stays as it is: not read, not put away, its curve not retired; a copy of it is one’s own', async () => {
    const { agent, root } = await newStudio()
    const bench = (await agent.post(`${root}/starter-benches`, { process: 'salt' })).body
    const code = async (path: string, body: object) => (await agent.post(`${root}/${path}`, body)).body.data.code
    expect(await code(`benches/${bench.id}/readings`, { unit: 'lightness', values: wedgeValues })).toBe('combination_fixed')
    expect(await code(`benches/${bench.id}/archive`, { revision: 1 })).toBe('wrong_state')
    expect(await code(`curves/${bench.curveInUse.id}/retire`, {})).toBe('wrong_state')
    expect((await agent.patch(`${root}/benches/${bench.id}`, { process: 'gum', revision: 1 })).body.data.code).toBe('combination_fixed')
    const copy = await agent.post(`${root}/benches/${bench.id}/copy`, { name: 'Mine' })
    expect(copy.body).toMatchObject({ starter: false, process: 'salt', curveInUse: null })
  })
})
