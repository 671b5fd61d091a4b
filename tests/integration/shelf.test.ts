import { v7 as uuidv7 } from 'uuid'
import { describe, expect, it } from 'vitest'
import { sql } from '../support/database'
import { newNegative } from '../support/negatives'
import { newStudio } from '../support/studio'
import { wedgeValues } from './routes/world'

const cotton = {
  name: 'Cotton rag, smooth', notes: 'Sized twice.',
  facts: {
    maker: 'The mill down the river', weightGramsPerM2: 300, surface: 'hot-pressed', alkalineReserve: 'no', coatingMillilitresPerM2: 29.06,
    white: { lightness: 96.4, a: -0.6, b: 2.1 }, sizes: [{ widthMm: 560, heightMm: 760 }], lots: [{ name: 'Spring', since: '2026-03-02' }],
  },
}
const namesIn = (answer: { body: { items: { name: string }[] } }) => answer.body.items.map(item => item.name)

describe('the shelf', () => {
  it('lists newest first, page by page, without what was taken off', async () => {
    const { agent, root } = await newStudio()
    const names = ['One', 'Two', 'Three', 'Four', 'Five']
    for (const name of names) await agent.post(`${root}/papers`, { name })
    const first = (await agent.get(`${root}/papers?limit=3`)).body
    const second = (await agent.get(`${root}/papers?limit=3&cursor=${first.nextCursor}`)).body
    expect([...first.items, ...second.items].map((p: { name: string }) => p.name)).toEqual([...names].reverse())
    expect(second.nextCursor).toBeNull()
    await agent.post(`${root}/papers/${first.items[0].id}/archive`, { revision: 1 })
    expect((await agent.get(`${root}/papers`)).body.items).toHaveLength(4)
    expect((await agent.get(`${root}/papers?archived=true`)).body.items).toMatchObject([{ name: 'Five', revision: 2 }])
  })

  it('keeps what is known of each kind as it was written, and changes it as a whole', async () => {
    const { agent, root } = await newStudio()
    const made = (await agent.post(`${root}/papers`, cotton)).body
    expect(made).toMatchObject({ ...cotton, kind: 'papers', benchCount: 0, revision: 1 })
    const renamed = (await agent.patch(`${root}/papers/${made.id}`, { name: 'Cotton', revision: 1 })).body
    expect(renamed).toMatchObject({ name: 'Cotton', notes: cotton.notes, facts: cotton.facts, revision: 2 })
    expect((await agent.patch(`${root}/papers/${made.id}`, { facts: { surface: 'rough' }, revision: 2 })).body.facts).toEqual({ surface: 'rough' })
  })

  it('says which fact cannot be kept', async () => {
    const { agent, root } = await newStudio()
    const refused = await agent.post(`${root}/inkjets`, { name: 'Wide one', facts: { scaleX: 1.2, paths: [{ name: 'Film' }, { name: 'film' }], nativePixelsPerInch: [360.5] } })
    expect(refused.body).toMatchObject({ statusCode: 422, data: { code: 'invalid_input' } })
    expect(refused.body.data.issues.map((issue: { path: string }) => issue.path).sort()).toEqual(['facts.nativePixelsPerInch.0', 'facts.paths', 'facts.scaleX'])
    expect((await agent.post(`${root}/papers`, { name: 'Cotton', facts: { peakNanometres: 365 } })).body.data.issues[0].path).toBe('facts.peakNanometres')
  })

  it('made twice with one id is one record; with other facts it is refused', async () => {
    const { agent, root } = await newStudio()
    const id = uuidv7()
    const statuses = (await Promise.all([1, 2, 3].map(() => agent.post(`${root}/papers`, { id, ...cotton })))).map(answer => answer.status)
    expect(statuses.sort()).toEqual([200, 200, 201])
    expect((await agent.post(`${root}/papers`, { id, ...cotton, facts: {} })).body.data.code).toBe('id_taken')
  })

  it('is searched across its drawers by all words, in names, notes and values, not in the names of facts', async () => {
    const { agent, root } = await newStudio()
    await agent.post(`${root}/papers`, cotton)
    await agent.post(`${root}/papers`, { name: 'Cotton rag, rough', facts: { weightGramsPerM2: 640, surface: 'rough' } })
    await agent.post(`${root}/lamps`, { name: 'Côté fenêtre', notes: 'Beside the cotton press.', facts: { source: 'uv-led', peakNanometres: 395 } })
    await agent.post(`${root}/sensitizers`, { name: 'Two parts', facts: { parts: [{ name: 'A', substances: [{ substance: 'Ferric ammonium citrate', amount: '25 g' }] }] } })
    const find = async (words: string) => namesIn(await agent.get(`${root}/shelf?words=${encodeURIComponent(words)}`))
    expect(await find('cotton')).toEqual(['Côté fenêtre', 'Cotton rag, rough', 'Cotton rag, smooth'])
    expect(await find('COTTON hot-pressed')).toEqual(['Cotton rag, smooth'])
    expect(await find('29,06')).toEqual(['Cotton rag, smooth'])
    expect(await find('côté')).toEqual(['Côté fenêtre'])
    expect(await find('CÔTÉ uv led')).toEqual(['Côté fenêtre'])
    expect(await find('citrate')).toEqual(['Two parts'])
    expect(await find('coatingMillilitres')).toEqual([])
    expect(await find('100%_')).toEqual([])
    expect(await find('  ')).toHaveLength(4)
    const first = (await agent.get(`${root}/shelf?words=cotton&limit=2`)).body
    expect(namesIn(await agent.get(`${root}/shelf?words=cotton&limit=2&cursor=${first.nextCursor}`))).toEqual(['Cotton rag, smooth'])
  })

  it('is a studio’s own: nobody finds another’s things', async () => {
    const [one, other] = [await newStudio(), await newStudio()]
    await one.agent.post(`${one.root}/papers`, cotton)
    expect(namesIn(await other.agent.get(`${other.root}/shelf?words=cotton`))).toEqual([])
    expect((await other.agent.get(`${one.root}/shelf?words=cotton`)).status).toBe(404)
  })

  it('gives back what was taken off', async () => {
    const { agent, root } = await newStudio()
    const { id } = (await agent.post(`${root}/films`, { name: 'Clear, thick' })).body
    await agent.post(`${root}/films/${id}/archive`, { revision: 1 })
    expect(namesIn(await agent.get(`${root}/shelf`))).toEqual([])
    expect(namesIn(await agent.get(`${root}/shelf?archived=true`))).toEqual(['Clear, thick'])
    expect((await agent.post(`${root}/films/${id}/restore`, { revision: 2 })).body).toMatchObject({ archivedAt: null, revision: 3 })
    expect(namesIn(await agent.get(`${root}/films`))).toEqual(['Clear, thick'])
  })

  it('tells on which benches a thing stands, and which of them have been printed', async () => {
    const { agent, root } = await newStudio()
    const { id } = (await agent.post(`${root}/papers`, cotton)).body
    const benches: string[] = []
    for (const name of ['One', 'Two', 'Three']) benches.push((await agent.post(`${root}/benches`, { name, process: 'cyanotype', paperId: id })).body.id)
    await agent.post(`${root}/benches/${benches[0]}/readings`, { unit: 'lightness', values: wedgeValues })
    await agent.post(`${root}/benches/${benches[2]}/archive`, { revision: 1 })
    const record = (await agent.get(`${root}/papers/${id}`)).body
    expect(record.benchCount).toBe(2)
    expect(record.benches).toEqual([{ id: benches[1], name: 'Two', process: 'cyanotype', combinationFixed: false }, { id: benches[0], name: 'One', process: 'cyanotype', combinationFixed: true }])
    expect((await agent.get(`${root}/shelf`)).body.items[0].benchCount).toBe(2)
  })

  it('changed by two people at once takes one change, and is written in the audit', async () => {
    const { agent, root, ids } = await newStudio()
    const { id } = (await agent.post(`${root}/papers`, cotton)).body
    const answers = await Promise.all(['Left', 'Right'].map(name => agent.patch(`${root}/papers/${id}`, { facts: { maker: name }, revision: 1 })))
    expect(answers.map(answer => answer.status).sort()).toEqual([200, 409])
    expect(await sql('select kind from events where studio_id = $1 and record_id = $2 order by kind', [ids.studio, id])).toEqual([{ kind: 'papers.changed' }, { kind: 'papers.created' }])
  })
})

describe('what the shelf knows', () => {
  it('stands on the print card: the film’s own drying and side; the inkjet’s native resolutions give no warning', async () => {
    const studio = await newStudio()
    const { agent, root } = studio
    const film = (await agent.post(`${root}/films`, { name: 'Clear', facts: { dryingMinutes: 55, coatedSide: 'the side without the notch' } })).body
    const inkjet = (await agent.post(`${root}/inkjets`, { name: 'Wide one', facts: { nativePixelsPerInch: [400] } })).body
    const bench = (await agent.post(`${root}/starter-benches`, { process: 'cyanotype' })).body
    const own = (await agent.post(`${root}/benches/${bench.id}/copy`, { name: 'Mine', filmId: film.id, inkjetId: inkjet.id })).body
    const reading = (await agent.post(`${root}/benches/${own.id}/readings`, { unit: 'lightness', values: wedgeValues })).body
    await agent.post(`${root}/curves/${(await agent.post(`${root}/benches/${own.id}/curves`, { readingIds: [reading.id] })).body.id}/use`)
    const card = async (pixelsPerInch: number) => {
      const negative = await newNegative(studio, { benchId: own.id, process: undefined, pixelsPerInch })
      return JSON.stringify((await agent.get(`${root}/negatives/${negative.id}/print-card?format=tiff`)).body.lines)
    }
    const native = await card(400)
    expect(native).toContain('55 minutes')
    expect(native).toContain('The side without the notch')
    expect(native).not.toContain('rescaled')
    expect(await card(360)).toContain('Wide one takes 400 pixels per inch')
  })
})
