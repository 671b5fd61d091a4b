import { v7 as uuidv7 } from 'uuid'
import { describe, expect, it } from 'vitest'
import { withDatabase } from '../support/database'
import { newNegative, newPhoto } from '../support/negatives'
import { newStudio } from '../support/studio'

type Studio = Awaited<ReturnType<typeof newStudio>>

/** A bench with a curve in use, from five typed values. */
async function newBench({ agent, root }: Studio, changes: object = {}) {
  const bench = (await agent.post(`${root}/benches`, { name: 'Mill paper', process: 'cyanotype', ...changes })).body
  return { bench, curve: await newCurve({ agent, root }, bench.id, 20) }
}
async function newCurve({ agent, root }: Pick<Studio, 'agent' | 'root'>, benchId: string, blackLightness: number, use = true) {
  const values = [0, 0.25, 0.5, 0.75, 1].map(level => ({ level, value: blackLightness + level * (95 - blackLightness) }))
  const reading = (await agent.post(`${root}/benches/${benchId}/readings`, { unit: 'lightness', values })).body
  const curve = (await agent.post(`${root}/benches/${benchId}/curves`, { readingIds: [reading.id] })).body
  return use ? (await agent.post(`${root}/curves/${curve.id}/use`)).body : curve
}

describe('making a negative', () => {
  it('resolves bench, curve, aim, mirroring, crop and film', async () => {
    const studio = await newStudio()
    const negative = await newNegative(studio, { size: { widthMm: 203.2, heightMm: 254 }, margin: { mm: 10, kind: 'clear' } })
    // By hand: 480 × 320 on 4 : 5 keeps 256 of its width; 8 × 10 in at 360 with 142 pixels of margin.
    expect(negative).toMatchObject({
      name: 'weir', process: 'cyanotype', mirror: true, aim: 'even-lightness', pixelsPerInch: 360, fit: 'crop', newerCurve: null, renders: [],
      film: { widthPixels: 2880 + 2 * 142, heightPixels: 3600 + 2 * 142, widthMm: 223.2, heightMm: 274 },
      curve: { version: 1, calibrated: false },
    })
    expect(negative.crop).toMatchObject({ y: 0, height: 1 })
    expect(negative.crop.width).toBeCloseTo(256 / 480, 12)
    expect(negative.warnings.map((w: { code: string }) => w.code)).toEqual(['uncalibrated', 'few_pixels'])
    expect((await studio.agent.get(`${studio.root}/negatives/${negative.id}`)).body).toEqual(negative)
    expect((await studio.agent.get(`${studio.root}/negatives`)).body.items).toEqual([negative])
  })

  it('answers the same id and body with the stored one, and another body with 409', async () => {
    const studio = await newStudio()
    const body = { id: uuidv7(), photoId: (await newPhoto(studio)).id, process: 'salt', size: { widthMm: 50, heightMm: 50 } }
    const first = await studio.agent.post(`${studio.root}/negatives`, body)
    const again = await studio.agent.post(`${studio.root}/negatives`, body)
    const other = await studio.agent.post(`${studio.root}/negatives`, { ...body, pixelsPerInch: 300 })
    expect([first.status, again.status, other.status]).toEqual([201, 200, 409])
    expect(again.body).toEqual(first.body)
    expect(other.body.data.code).toBe('id_taken')
  })

  it('names the limit of a film’s pixels and what would fit', async () => {
    const studio = await newStudio()
    const answer = await studio.agent.post(`${studio.root}/negatives`, { photoId: (await newPhoto(studio)).id, process: 'cyanotype', size: { widthMm: 1000, heightMm: 1000 }, pixelsPerInch: 720 })
    expect([answer.status, answer.body.data.code]).toEqual([422, 'film_too_large'])
    // By hand: √(200 000 000) / (1000 / 25.4) = 359.2 pixels per inch.
    expect(answer.body.message).toMatch(/200 million.*359 pixels per inch/)
  })

  it.each([
    ['a negative size', { size: { widthMm: -60, heightMm: 40 } }, 422, 'invalid_input'],
    ['a size that is no number', { size: { widthMm: 'wide', heightMm: 40 } }, 422, 'invalid_input'],
    ['NaN', { pixelsPerInch: Number.NaN }, 422, 'invalid_input'],
    ['a name of 10 000 characters', { name: 'x'.repeat(10_000) }, 422, 'invalid_input'],
    ['a crop beyond the picture', { crop: { x: 0.5, y: 0, width: 0.6, height: 1 } }, 422, 'invalid_input'],
    ['a process without a starter curve', { process: 'carbon' }, 422, 'no_starter_curve'],
    ['neither bench nor process', { process: undefined }, 422, 'invalid_input'],
    ['a bench that is not there', { process: undefined, benchId: uuidv7() }, 404, 'not_found'],
    ['a curve that is not the bench’s', { curveId: uuidv7() }, 404, 'not_found'],
    ['a photo that is not there', { photoId: uuidv7() }, 404, 'not_found'],
    ['a field that is not known', { colour: 'red' }, 422, 'invalid_input'],
  ])('refuses %s', async (_, changes, status, code) => {
    const studio = await newStudio()
    const answer = await studio.agent.post(`${studio.root}/negatives`, { photoId: (await newPhoto(studio)).id, process: 'cyanotype', size: { widthMm: 60, heightMm: 40 }, ...changes })
    expect([answer.status, answer.body.data.code]).toEqual([status, code])
    expect((await studio.agent.get(`${studio.root}/negatives`)).body.items).toEqual([])
  })

  it('refuses another studio’s photo and bench', async () => {
    const [studio, other] = [await newStudio(), await newStudio()]
    const [photo, strange] = [await newPhoto(studio), await newPhoto(other)]
    const { bench } = await newBench(other)
    const size = { widthMm: 60, heightMm: 40 }
    expect((await studio.agent.post(`${studio.root}/negatives`, { photoId: strange.id, process: 'salt', size })).status).toBe(404)
    expect((await studio.agent.post(`${studio.root}/negatives`, { photoId: photo.id, benchId: bench.id, size })).status).toBe(404)
  })

  it('says that a bench has no curve in use', async () => {
    const studio = await newStudio()
    const bench = (await studio.agent.post(`${studio.root}/benches`, { name: 'New', process: 'salt' })).body
    const answer = await studio.agent.post(`${studio.root}/negatives`, { photoId: (await newPhoto(studio)).id, benchId: bench.id, size: { widthMm: 60, heightMm: 40 } })
    expect([answer.status, answer.body.data.code]).toEqual([422, 'no_curve'])
  })

  it('lets members use curves in use only', async () => {
    const [studio, member] = [await newStudio(), await newStudio()]
    const { bench, curve } = await newBench(studio)
    const draft = await newCurve(studio, bench.id, 25, false)
    await withDatabase(sql => sql(`insert into memberships (studio_id, user_id, role) values ($1, $2, 'member')`, [studio.ids.studio, member.ids.user]))
    const inStudio = { agent: member.agent, root: studio.root }
    const photo = await newPhoto(inStudio)
    const body = { photoId: photo.id, benchId: bench.id, size: { widthMm: 60, heightMm: 40 } }
    expect((await member.agent.post(`${studio.root}/negatives`, { ...body, curveId: draft.id })).status).toBe(403)
    const made = await member.agent.post(`${studio.root}/negatives`, body)
    expect([made.status, made.body.curveId]).toEqual([201, curve.id])
    expect((await studio.agent.get(`${studio.root}/negatives/${made.body.id}`)).status).toBe(404)
  })
})

describe('changing a negative', () => {
  it('replaces what is named, keeps the rest, and refuses a stale revision', async () => {
    const studio = await newStudio()
    const negative = await newNegative(studio, { crop: { x: 0, y: 0, width: 0.5, height: 0.5 } })
    const path = `${studio.root}/negatives/${negative.id}`
    const changed = await studio.agent.patch(path, { revision: 1, name: 'Weir, large', size: { widthMm: 90, heightMm: 60 }, aim: 'keep-middle-tones' })
    expect(changed.body).toMatchObject({ name: 'Weir, large', size: { widthMm: 90, heightMm: 60 }, aim: 'keep-middle-tones', crop: negative.crop, pixelsPerInch: 360, revision: 2 })
    const back = await studio.agent.patch(path, { revision: 2, crop: null, aim: null })
    expect(back.body).toMatchObject({ crop: { x: 0, y: 0, width: 1, height: 1 }, aim: 'even-lightness' })
    const stale = await studio.agent.patch(path, { revision: 2, name: 'Late' })
    expect([stale.status, stale.body.data.code]).toEqual([409, 'stale_revision'])
    expect((await studio.agent.patch(path, { revision: 3, size: { widthMm: 1500, heightMm: 1500 }, pixelsPerInch: 1440 })).body.data.code).toBe('film_too_large')
  })

  it('offers a newer curve and takes it only when asked', async () => {
    const studio = await newStudio()
    const { bench, curve } = await newBench(studio)
    const negative = await newNegative(studio, { process: undefined, benchId: bench.id })
    const newer = await newCurve(studio, bench.id, 25)
    const path = `${studio.root}/negatives/${negative.id}`
    expect((await studio.agent.get(path)).body).toMatchObject({ curveId: curve.id, newerCurve: { id: newer.id, version: 2 } })
    expect((await studio.agent.patch(path, { revision: 1, curveId: 'in-use' })).body).toMatchObject({ curveId: newer.id, newerCurve: null })
  })

  it('takes another bench’s curve and mirroring with the bench', async () => {
    const studio = await newStudio()
    const negative = await newNegative(studio)
    const { bench, curve } = await newBench(studio, { process: 'gum', mirror: false })
    const moved = await studio.agent.patch(`${studio.root}/negatives/${negative.id}`, { revision: 1, benchId: bench.id })
    expect(moved.body).toMatchObject({ benchId: bench.id, process: 'gum', curveId: curve.id, mirror: false })
  })
})

describe('a negative', () => {
  it('stays when its photo goes into the bin, and no other is made of it there', async () => {
    const studio = await newStudio()
    const negative = await newNegative(studio)
    await studio.agent.delete(`${studio.root}/photos/${negative.photoId}`)
    expect((await studio.agent.get(`${studio.root}/negatives/${negative.id}`)).status).toBe(200)
    const another = await studio.agent.post(`${studio.root}/negatives`, { photoId: negative.photoId, process: 'salt', size: { widthMm: 60, heightMm: 40 } })
    expect([another.status, another.body.data.code]).toEqual([409, 'wrong_state'])
  })

  it('is put away for good', async () => {
    const studio = await newStudio()
    const negative = await newNegative(studio)
    const path = `${studio.root}/negatives/${negative.id}`
    expect((await studio.agent.delete(path)).status).toBe(204)
    expect((await studio.agent.get(path)).status).toBe(404)
    expect((await studio.agent.get(`${studio.root}/negatives`)).body.items).toEqual([])
  })

  it('is listed page by page and by photo', async () => {
    const studio = await newStudio()
    const photo = await newPhoto(studio)
    const made = []
    for (const name of ['a', 'b', 'c']) made.push(await newNegative(studio, { photoId: photo.id, name }))
    const first = (await studio.agent.get(`${studio.root}/negatives?limit=2`)).body
    const rest = (await studio.agent.get(`${studio.root}/negatives?limit=2&cursor=${first.nextCursor}`)).body
    expect([...first.items, ...rest.items].map(n => n.name)).toEqual(['c', 'b', 'a'])
    expect(rest.nextCursor).toBeNull()
    expect((await studio.agent.get(`${studio.root}/negatives?photoId=${uuidv7()}`)).body.items).toEqual([])
  })

  it('is not there for another studio', async () => {
    const [studio, other] = [await newStudio(), await newStudio()]
    const { id } = await newNegative(studio)
    for (const part of ['', '/file', '/forecast', '/print-card']) {
      expect((await other.agent.get(`${studio.root}/negatives/${id}${part}`)).status).toBe(404)
      expect((await other.agent.get(`${other.root}/negatives/${id}${part}`)).status).toBe(404)
    }
  })

  it('has a forecast in three states', async () => {
    const studio = await newStudio()
    const { id } = await newNegative(studio)
    for (const state of ['photo', 'film', 'print']) {
      const answer = await studio.agent.fetch('GET', `${studio.root}/negatives/${id}/forecast?width=90&state=${state}`)
      expect([answer.status, answer.headers.get('content-type')]).toEqual([200, 'image/png'])
      const bytes = Buffer.from(await answer.arrayBuffer())
      // PNG's header: width and height stand at bytes 16 and 20 (ISO/IEC 15948, clause 11.2.2).
      expect([bytes.readUInt32BE(16), bytes.readUInt32BE(20)]).toEqual([90, 60])
    }
  })

  it('has a print card with what must be checked and set', async () => {
    const studio = await newStudio()
    const { bench } = await newBench(studio, { path: { fileKind: 'tiff', pixelsPerInch: 360, mediaType: 'Glossy film', quality: 'Best' }, baseExposure: { value: 480, unit: 's' } })
    const { id } = await newNegative(studio, { process: undefined, benchId: bench.id, margin: { mm: 8, kind: 'clear' } })
    const card = (await studio.agent.get(`${studio.root}/negatives/${id}/print-card?format=pdf`)).body
    const text = (label: string) => card.lines.find((line: { label: string }) => line.label === label)?.text
    expect(text('Printed size')).toContain('60 × 40 mm, 76 × 56 mm with its margins')
    expect([text('Media type'), text('Quality'), text('Base exposure')]).toEqual(['Glossy film', 'Best', '480 s'])
    expect(text('Scale')).toMatch(/100 %/)
    expect(text('Drying')).toMatch(/30 minutes/)
    expect(text('Mind')).toBeDefined()
    expect(card.lines.map((line: { label: string }) => line.label)).toEqual(expect.arrayContaining(['Nozzle check', 'Film side', 'Colour adjustment', 'On the paper']))
  })
})
