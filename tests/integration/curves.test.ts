import Papa from 'papaparse'
import { v7 as uuidv7 } from 'uuid'
import { beforeEach, describe, expect, it } from 'vitest'
import { seededRandom } from '../../shared/calibration/random'
import { layoutWedge, type WedgeRecord } from '../../shared/calibration/wedge-layout'
import { sql } from '../support/database'
import { newPhoto } from '../support/negatives'
import { newPersonIn } from '../support/people'
import { printQualities, rampErrors } from '../support/simulator/print'
import { drawSystem } from '../support/simulator/system'
import { printWedge } from '../support/simulator/wedge'
import { newStudio } from '../support/studio'
import { wedgeValues } from './routes/world'

let studio: Awaited<ReturnType<typeof newStudio>>
let bench: string
let post: (path: string, json?: unknown, headers?: Record<string, string>) => Promise<{ status: number, body: any }> // eslint-disable-line @typescript-eslint/no-explicit-any
beforeEach(async () => {
  studio = await newStudio()
  post = (path, json) => studio.agent.post(`${studio.root}/${path}`, json)
  bench = (await post('benches', { name: 'Window bench', process: 'cyanotype' })).body.id
})
const read = (json: object) => post(`benches/${bench}/readings`, json)
const readText = (type: string, text: string, query = '') => studio.agent.call('POST', `${studio.root}/benches/${bench}/readings${query}`, { body: text, headers: { 'content-type': type } })
const codes = ({ warnings }: { warnings: { code: string }[] }) => warnings.map(w => w.code)
const newCurve = async () => (await post(`benches/${bench}/curves`, { readingIds: [(await read({ unit: 'lightness', values: wedgeValues })).body.id] })).body

describe('a reading', () => {
  it('keeps its patches in the order they came', async () => {
    const values = [...wedgeValues].reverse()
    const { status, body } = await read({ unit: 'lightness', values })
    expect(status).toBe(201)
    expect(body).toMatchObject({ state: 'ready', quality: 'measured', unit: 'lightness', zero: 'absolute', benchId: bench, warnings: [] })
    expect(body.patches.map((p: { level: number }) => p.level)).toEqual(values.map(v => v.level))
    expect((await studio.agent.get(`${studio.root}/readings/${body.id}`)).body).toEqual(body)
  })

  // tone.md: L* 95 paper and 1.38 above it make L* 22.5; CIE 15:2004 and density's definition, by hand.
  it('of densities above the paper counts the paper’s own density in, and says how zero was taken', async () => {
    const densities = [1.38, 1, 0.6, 0.3, 0]
    const above = (await read({ unit: 'density', zero: 'paper', paperLightness: 95, values: densities.map((value, i) => ({ level: i / 4, value })) })).body
    expect(above).toMatchObject({ zero: 'paper', paperLightness: 95 })
    expect(above.patches[0].lightness).toBeCloseTo(22.5, 1)
    expect(above.patches[4].lightness).toBeCloseTo(95, 6)
    const absolute = (await read({ unit: 'density', values: densities.map((value, i) => ({ level: i / 4, value: value + 0.05 })) })).body
    expect(absolute.zero).toBe('absolute')
    expect(codes(absolute)).toContain('zero_assumed_absolute')
  })

  it('that falls somewhere is kept with a warning', async () => {
    const values = wedgeValues.map((v, i) => i === 10 ? { ...v, value: v.value - 8 } : v)
    expect(codes((await read({ unit: 'lightness', values })).body)).toContain('not_monotone')
  })

  it('comes as CSV, with a decimal comma too', async () => {
    const rows = wedgeValues.map(v => [v.level, v.value])
    const csv = await readText('text/csv; charset=utf-8', Papa.unparse([['level', 'lightness'], ...rows]))
    expect(csv.status, csv.text).toBe(201)
    const comma = await readText('text/csv', [['level', 'lightness'], ...rows].map(row => row.map(cell => String(cell).replace('.', ',')).join(';')).join('\r\n'))
    const typed = (await read({ unit: 'lightness', values: wedgeValues })).body.patches
    for (const { body } of [csv, comma]) expect(body.patches).toEqual(typed)
  })

  it('comes as CGATS text', async () => {
    const text = ['CGATS.17', 'NUMBER_OF_FIELDS 2', 'BEGIN_DATA_FORMAT', 'LEVEL LAB_L', 'END_DATA_FORMAT', `NUMBER_OF_SETS ${wedgeValues.length}`, 'BEGIN_DATA', ...wedgeValues.map(v => `${v.level} ${v.value}`), 'END_DATA'].join('\n')
    const { status, body } = await readText('text/plain', text)
    expect(status).toBe(201)
    expect(body.patches.map((p: { lightness: number }) => p.lightness)).toEqual(wedgeValues.map(v => v.value))
  })

  it('asked for again with its id is the stored one; other values are refused, also from a text', async () => {
    const id = uuidv7()
    const answers = await Promise.all(Array.from({ length: 4 }, () => read({ id, unit: 'lightness', values: wedgeValues })))
    expect(answers.map(a => a.status).sort()).toEqual([200, 200, 200, 201])
    expect((await read({ id, unit: 'lightness', values: wedgeValues.slice(1) })).body.data.code).toBe('id_taken')
    expect((await readText('text/csv', Papa.unparse(wedgeValues.map(v => ({ level: v.level, lightness: v.value }))), `?id=${id}`)).body.data.code).toBe('id_taken')
  })

  it('that can’t be used leaves nothing behind', async () => {
    expect((await readText('text/csv', 'level,lightness\n0,20\n1,90\n')).body.data.code).toBe('too_few_levels')
    expect((await readText('text/plain', 'BEGIN_DATA\n1 2\nEND_DATA')).body.data.code).toBe('unparsable')
    expect((await readText('text/csv', `level,lightness\n${'0,1\n'.repeat(2_600_000)}`)).body.data.code).toBe('body_too_large')
    expect((await studio.agent.get(`${studio.root}/benches/${bench}/readings`)).body.items).toEqual([])
  })
})

describe('a curve', () => {
  it('is a draft fitted from readings of its bench, rising, with its error told', async () => {
    const curve = await newCurve()
    expect(curve).toMatchObject({ version: 1, state: 'draft', aim: 'even-lightness', calibrated: true, inUseSince: null })
    expect(curve.points).toHaveLength(1025)
    for (let i = 1; i < curve.points.length; i++) expect(curve.points[i].level).toBeGreaterThanOrEqual(curve.points[i - 1].level)
    for (const { level, levelLow, levelHigh } of curve.points) expect(level >= levelLow && level <= levelHigh).toBe(true)
    expect(curve.expectedError.nextPrint.p95).toBeGreaterThan(curve.expectedError.curve.p95)
    // The wedge's own formula, inverted by hand: even lightness at tone ½ is half of the way, (½)^(1/1.3) of the ink.
    expect(curve.points[512].level).toBeCloseTo(0.5 ** (1 / 1.3), 2)
    expect(Math.abs(curve.blackLightness - 24)).toBeLessThan(0.5)
    expect(Math.abs(curve.whiteLightness - 92)).toBeLessThan(0.5)
  })

  it('takes readings of its own bench only', async () => {
    const reading = (await read({ unit: 'lightness', values: wedgeValues })).body.id
    const other = (await post('benches', { name: 'Other', process: 'salt' })).body.id
    const answer = await post(`benches/${other}/curves`, { readingIds: [reading] })
    expect(answer.body.data).toMatchObject({ code: 'invalid_input', issues: [{ path: 'readingIds.0' }] })
  })

  it('follows on another by its version, also when made at once', async () => {
    const readingIds = [(await read({ unit: 'lightness', values: wedgeValues })).body.id]
    const made = await Promise.all(['even-lightness', 'keep-middle-tones', 'even-density'].map(aim => post(`benches/${bench}/curves`, { readingIds, aim })))
    expect(made.map(a => a.body.version).sort()).toEqual([1, 2, 3])
    const { items } = (await studio.agent.get(`${studio.root}/benches/${bench}/curves`)).body
    expect(items).toHaveLength(3)
    expect(items[0].points).toBeUndefined()
    expect(items[0].readingIds).toEqual(readingIds)
  })

  it('made many times with one id is made once', async () => {
    const body = { id: uuidv7(), readingIds: [(await read({ unit: 'lightness', values: wedgeValues })).body.id] }
    const answers = await Promise.all(Array.from({ length: 3 }, () => post(`benches/${bench}/curves`, body)))
    expect(answers.map(a => a.status).sort()).toEqual([200, 200, 201])
    expect((await post(`benches/${bench}/curves`, { ...body, aim: 'even-density' })).body.data.code).toBe('id_taken')
  })

  it('put in use retires the one before', async () => {
    const [first, second] = [await newCurve(), await newCurve()]
    await post(`curves/${first.id}/use`)
    const used = (await post(`curves/${second.id}/use`)).body
    expect(used).toMatchObject({ state: 'in-use', version: 2 })
    expect((await studio.agent.get(`${studio.root}/curves/${first.id}`)).body.state).toBe('retired')
    expect((await studio.agent.get(`${studio.root}/benches/${bench}`)).body.curveInUse).toMatchObject({ id: second.id, calibrated: true })
    await post(`curves/${second.id}/retire`)
    expect((await studio.agent.get(`${studio.root}/benches/${bench}`)).body.curveInUse).toBeNull()
  })

  it('is the one in use, whoever puts several in use at once', async () => {
    const curves = [await newCurve(), await newCurve(), await newCurve()]
    const answers = await Promise.all([...curves, ...curves].map(({ id }) => post(`curves/${id}/use`)))
    expect(answers.map(a => a.status)).toEqual(Array(6).fill(200))
    const states = await sql('select state from curves where studio_id = $1', [studio.ids.studio])
    expect(states.map(row => row.state).sort()).toEqual(['in-use', 'retired', 'retired'])
  })

  it('carries who fitted it, and notes that the last reader may change', async () => {
    const curve = await newCurve()
    expect(curve).toMatchObject({ notes: '', revision: 1, createdBy: 'Ines Marlow' })
    const change = (notes: string, revision: number) => studio.agent.patch(`${studio.root}/curves/${curve.id}`, { notes, revision })
    expect((await change('New batch; looked dry.', 1)).body).toEqual({ ...curve, notes: 'New batch; looked dry.', revision: 2 })
    expect((await change('Another note', 1)).status).toBe(409)
  })

  it('can be seen by members, who change nothing', async () => {
    const curve = await newCurve()
    const { agent } = await newPersonIn(studio.ids.studio, 'member')
    expect((await agent.get(`${studio.root}/curves/${curve.id}`)).body.points).toHaveLength(1025)
    expect((await agent.post(`${studio.root}/curves/${curve.id}/use`)).status).toBe(403)
  })
})

describe('a curve from scanned wedges', () => {
  const random = seededRandom(9)
  const system = drawSystem(random, { exposureScaleFrom: 1.5, exposureScaleTo: 2 })

  /** A finished scan of a print of the wedge, as reading leaves it. */
  async function scanOf(wedge: { id: string, patches: { level: number }[] }, printId: string | null, plan: WedgeRecord, quality = 'scan') {
    const printed = printWedge(system, layoutWedge(plan), printQualities.typical, random)
    expect(printed.map(p => p.level)).toEqual(wedge.patches.map(p => p.level))
    const patches = printed.map(({ level, lightness }) => ({ level, lightness, lab: [lightness, 0, 2], deviation: 1, used: true }))
    const id = uuidv7()
    await sql(`insert into readings (studio_id, id, bench_id, state, quality, patches, wedge_id, wedge_print_id, body_hash) values ($1, $2, $3, 'ready', $4, $5, $6, $7, 'x')`,
      [studio.ids.studio, id, bench, quality, JSON.stringify(patches), wedge.id, printId])
    return id
  }
  async function newWedge(kind = 'scattered') {
    const wedge = (await post(`benches/${bench}/wedges`, { page: { widthMm: 210, heightMm: 297 }, kind })).body
    const [row] = await sql('select plan from wedges where id = $1', [wedge.id])
    return { wedge, plan: row!.plan as WedgeRecord, print: (await post(`wedges/${wedge.id}/prints`, {})).body.id as string }
  }
  const curveFrom = async (...readingIds: string[]) => (await post(`benches/${bench}/curves`, { readingIds })).body

  it('uses where the patches stand, and keeps bands, basis, colours and expected errors', async () => {
    const { wedge, plan, print } = await newWedge()
    const curve = await curveFrom(await scanOf(wedge, print, plan))
    expect(curve.basis).toMatchObject({ prints: 1, printSpread: null, reversal: null })
    expect(curve.basis.patchesUsed + curve.basis.patchesDropped).toBe(wedge.patches.length)
    expect(curve.bandOfAll.low).toHaveLength(1025)
    expect(curve.colourPath[0][0]).toBeGreaterThan(curve.colourPath.at(-1)[0])
    const { nextPrint, nextPrintWithOneMore, curve: own } = curve.expectedError
    expect(own.p95).toBeLessThan(nextPrintWithOneMore.p95)
    expect(nextPrintWithOneMore.p95).toBeLessThan(nextPrint.p95)
    // The simulator's truth: what people do today is off by 1.8 L* in median.
    expect(rampErrors(system, curve.points.map((p: { level: number }) => p.level)).greatest).toBeLessThan(1)
  })

  it('counts two scans of one print once, and two prints twice', async () => {
    const { wedge, plan, print } = await newWedge()
    const [one, again] = [await scanOf(wedge, print, plan), await scanOf(wedge, print, plan)]
    expect((await curveFrom(one, again)).basis.prints).toBe(1)
    const second = (await post(`wedges/${wedge.id}/prints`, {})).body.id
    expect((await curveFrom(one, await scanOf(wedge, second, plan))).basis.prints).toBe(2)
  })

  it('says that a phone took part, and that the path has changed since', async () => {
    const { wedge, plan, print } = await newWedge()
    const id = await scanOf(wedge, print, plan, 'phone')
    await sql(`update wedges set path = '{"bitDepth": 8}' where id = $1`, [wedge.id])
    expect(codes(await curveFrom(id))).toEqual(expect.arrayContaining(['phone_reading', 'other_path']))
  })

  it('is refused from a mixture with typed values, and from a guide', async () => {
    const { wedge, plan, print } = await newWedge()
    const typed = (await read({ unit: 'lightness', values: wedgeValues })).body.id
    const mixed = await post(`benches/${bench}/curves`, { readingIds: [await scanOf(wedge, print, plan), typed] })
    expect(mixed.body.data.code).toBe('reading_unfit')
    const strip = (await post(`benches/${bench}/wedges`, { page: { widthMm: 210, heightMm: 297 }, kind: 'ink-load' })).body
    const id = uuidv7()
    await sql(`insert into readings (studio_id, id, bench_id, state, quality, patches, wedge_id, body_hash) values ($1, $2, $3, 'ready', 'scan', '[]', $4, 'x')`, [studio.ids.studio, id, bench, strip.id])
    expect((await post(`benches/${bench}/curves`, { readingIds: [id] })).body.data).toMatchObject({ code: 'invalid_input', issues: [{ path: 'readingIds.0' }] })
  })
})

describe('in a density channel', () => {
  it('every aim is linear in that density, for curves and for negatives', async () => {
    const ofGum = (await post('benches', { name: 'Yellow gum', process: 'gum', readingChannel: 'density-blue' })).body.id
    const reading = (await post(`benches/${ofGum}/readings`, { unit: 'density', values: Array.from({ length: 21 }, (_, i) => ({ level: i / 20, value: 1.3 - 1.2 * i / 20 })) })).body
    const curve = (await post(`benches/${ofGum}/curves`, { readingIds: [reading.id], aim: 'keep-middle-tones' })).body
    expect(curve.aim).toBe('even-density')
    // Density falls straight with ink, so half of the tones is half of the ink.
    expect(curve.points[512].level).toBeCloseTo(0.5, 1)
    await post(`curves/${curve.id}/use`)
    const photo = await newPhoto(studio)
    const negative = (await post('negatives', { photoId: photo.id, benchId: ofGum, size: { widthMm: 60, heightMm: 60 }, aim: 'even-lightness' })).body
    expect(negative.aim).toBe('even-density')
    const changed = (await studio.agent.patch(`${studio.root}/negatives/${negative.id}`, { revision: negative.revision, aim: 'keep-middle-tones' })).body
    expect(changed.aim).toBe('even-density')
  })
})

describe('a curve’s table', () => {
  it('has 1025 named rows that say what the curve says, in every format', async () => {
    const curve = await newCurve()
    const table = async (format: string) => await studio.agent.get(`${studio.root}/curves/${curve.id}/table?format=${format}`)
    const expected = curve.points.map((p: Record<string, number>) => [p.tone, p.level, p.levelLow, p.levelHigh])

    const json = JSON.parse((await table('json')).text)
    expect(json.rows.map((r: Record<string, number>) => [r.tone, r.level, r.levelLow, r.levelHigh])).toEqual(expected)

    const csv = await table('csv')
    expect(csv.headers.get('content-type')).toBe('text/csv; charset=utf-8')
    const parsed = Papa.parse<Record<string, number>>(csv.text, { header: true, dynamicTyping: true, skipEmptyLines: true })
    expect(parsed.meta.fields).toEqual(['tone', 'level', 'levelLow', 'levelHigh', 'lightness', 'density', 'ink_percent'])
    expect(parsed.data.map(r => [r.tone, r.level, r.levelLow, r.levelHigh])).toEqual(expected)
    const middle = parsed.data[512]!
    expect(middle.ink_percent).toBeCloseTo(100 * middle.level!, 9)
    // Density by its definition, −log₁₀ of the luminance of L* (CIE 15:2004, 8.2.1.1).
    expect(middle.density).toBeCloseTo(-3 * Math.log10((middle.lightness! + 16) / 116), 6)

    const lines = (await table('cgats')).text.split('\n')
    const names = lines[lines.indexOf('BEGIN_DATA_FORMAT') + 1]!.split(' ')
    const rows = lines.slice(lines.indexOf('BEGIN_DATA') + 1, lines.indexOf('END_DATA')).map(line => line.split(' ').map(Number))
    expect(names).toEqual(['SAMPLE_ID', 'TONE', 'LEVEL', 'LEVEL_LOW', 'LEVEL_HIGH', 'LAB_L', 'D_VIS', 'INK_PERCENT'])
    expect(lines).toContain('NUMBER_OF_SETS 1025')
    expect(rows.map(row => row.slice(1, 5))).toEqual(expected)
  })

  it('can be read back: its levels and lightnesses are a reading that gives the curve again', async () => {
    const curve = await newCurve()
    const text = (await studio.agent.get(`${studio.root}/curves/${curve.id}/table?format=cgats`)).text
    const { status, body } = await readText('text/plain', text)
    expect(status).toBe(201)
    expect(body.patches).toHaveLength(1025)
  })
})
