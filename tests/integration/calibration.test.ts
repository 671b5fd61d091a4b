import { setTimeout as sleep } from 'node:timers/promises'
import { v7 as uuidv7 } from 'uuid'
import { beforeAll, describe, expect, it } from 'vitest'
import { chartOf } from '../../shared/calibration/wedge/chart'
import type { Reading } from '../../shared/schemas/curves'
import { sql } from '../support/database'
import { newStudio } from '../support/studio'
import { newWedge, printOfChart, scanFile, scanForm, scanOf } from '../support/wedge-scans'
import { lightnessAfter, profilePoints, stripValues, tabletValues } from './routes/calibration'
import { wedgeValues } from './routes/world'

let studio: Awaited<ReturnType<typeof newStudio>>
beforeAll(async () => {
  studio = await newStudio()
})
const post = (path: string, json: unknown) => studio.agent.post(`${studio.root}/${path}`, json)
const get = (path: string) => studio.agent.get(`${studio.root}/${path}`)
const newBench = async (more: object = {}): Promise<string> => (await post('benches', { name: 'Window bench', process: 'cyanotype', ...more })).body.id
const newCurve = async (bench: string): Promise<string> =>
  (await post(`benches/${bench}/curves`, { readingIds: [(await post(`benches/${bench}/readings`, { unit: 'lightness', values: wedgeValues })).body.id] })).body.id

describe('the base exposure of a strip', () => {
  it('becomes the bench’s newest, with its bounds and what it was found from', async () => {
    const bench = await newBench({ baseExposure: { value: 300, unit: 's' } })
    const { status, body } = await post(`benches/${bench}/base-exposures`, { values: stripValues })
    expect(status).toBe(201)
    // Where that logistic print comes within 1 L* of its black: 60 s · 10^(ln(s/(1−s))/5) with s = 0.973, derived
    expect(Math.abs(Math.log2(body.exposureSeconds / 313))).toBeLessThan(0.2)
    expect(body.exposureSecondsLow).toBeLessThan(body.exposureSeconds)
    expect(body.exposureSecondsHigh).toBeGreaterThan(body.exposureSeconds)
    expect(body).toMatchObject({ unit: 's', goal: { kind: 'full-black' }, values: stripValues })
    expect((await get(`benches/${bench}`)).body.baseExposure).toMatchObject({ value: body.value, low: body.low, high: body.high })
    const { items } = (await get(`benches/${bench}/base-exposures`)).body
    expect(items.map((e: { value: number }) => e.value)).toEqual([body.value, 300])
    expect(items[1]).toMatchObject({ low: null, goal: null, values: null, warnings: [] })
  })

  it('counts light units where asked, and answers the same id twice alike', async () => {
    const bench = await newBench()
    const id = '018f0000-0000-7000-8000-00000000ab01'
    const body = { id, values: stripValues, unit: 'dose', goal: { kind: 'layer-survives' } }
    const first = await post(`benches/${bench}/base-exposures`, body)
    expect(first).toMatchObject({ status: 201, body: { unit: 'dose', exposureSeconds: null } })
    expect(await post(`benches/${bench}/base-exposures`, body)).toMatchObject({ status: 200, body: first.body })
    expect(await post(`benches/${bench}/base-exposures`, { ...body, unit: 's' })).toMatchObject({ status: 409, body: { data: { code: 'id_taken' } } })
  })

  it('is called a guess where the strip ends too soon', async () => {
    const { body } = await post(`benches/${await newBench()}/base-exposures`, { values: stripValues.slice(0, 7) })
    expect(body.warnings.map((w: { code: string }) => w.code)).toEqual(['strip_ends_too_soon'])
  })
})

describe('a step tablet', () => {
  it('gives scale, range and the step to expose for', async () => {
    const bench = await newBench({ baseExposure: { value: 600, unit: 's' } })
    const { body } = await post(`benches/${bench}/tablets`, { values: tabletValues(600), exposure: { value: 600, unit: 's' } })
    expect(body.isoSays).toContain('90 %')
    expect(body.isoRange).toBeCloseTo(100 * body.exposureScale, 9)
    // T at 0.04 of 1.32 net and S at 0.9: (logit(0.9) − logit(0.0303)) / 5 decades, derived
    expect(Math.abs(body.exposureScale - 1.132)).toBeLessThan(0.05)
    // At the tablet's own exposure the last full black is the last step within 1 L* of it.
    const lightest = Math.min(...tabletValues(600).map(v => v.lightness))
    const dark = tabletValues(600).filter(v => v.lightness <= lightest + 1).length
    expect(body.targetStep).toBe(dark)
    expect((await get(`benches/${bench}/tablets`)).body.items).toEqual([body])
  })

  it('carries a film’s densities to another paper, but not to another film', async () => {
    const bench = await newBench()
    const tablet = (await post(`benches/${bench}/tablets`, { values: tabletValues(600) })).body
    const film = (await post(`benches/${bench}/film-densities`, { tabletId: tablet.id, curveId: await newCurve(bench) })).body
    expect(film.points).toHaveLength(65)
    const paper = await newBench()
    const strip = (await post(`benches/${paper}/tablets`, { values: tabletValues(500) })).body
    const { status, body } = await post(`benches/${paper}/tablets/${strip.id}/film-curve`, { filmDensitiesId: film.id, notes: 'Second paper' })
    expect(status).toBe(201)
    expect(body).toMatchObject({ benchId: paper, state: 'draft', readingIds: [], notes: 'Second paper', warnings: [{ code: 'through_film', message: expect.stringContaining('0.02') }] })
    const other = await newBench({ process: 'salt' })
    const salt = (await post(`benches/${other}/tablets`, { values: tabletValues(500) })).body
    expect(await post(`benches/${other}/tablets/${salt.id}/film-curve`, { filmDensitiesId: film.id })).toMatchObject({ status: 422, body: { data: { code: 'invalid_input', issues: [{ message: expect.stringContaining('process') }] } } })
  })
})

describe('two benches', () => {
  it('stand on the same axes, with what differs; two changes at once are warned of', async () => {
    const paperId = (await post('papers', { name: 'Slip 200' })).body.id
    const [first, second, third] = await Promise.all([newBench(), newBench({ paperId }), newBench({ paperId, recipe: { coats: 2 } })])
    for (const bench of [first, second, third]) await newCurve(bench)
    const one = (await get(`benches/${first}/comparison?with=${second}`)).body
    expect(one.differences).toEqual([{ part: 'paper', first: 'not given', second: 'Slip 200' }])
    expect(one.warnings).toEqual([])
    expect(one.benches[0]).toMatchObject({ benchId: first, deepestLightness: expect.closeTo(24, 0), paperLightness: expect.closeTo(92, 0), evenness: null })
    expect((await get(`benches/${first}/comparison?with=${third}`)).body.warnings).toMatchObject([{ code: 'several_changes' }])
    const empty = await newBench()
    expect(await get(`benches/${first}/comparison?with=${empty}`)).toMatchObject({ status: 422, body: { data: { code: 'no_curve' } } })
  })
})

describe('a scan', () => {
  async function scanned(at: Awaited<ReturnType<typeof newWedge>>, fields: Record<string, string> = {}): Promise<Reading> {
    const bytes = await scanFile(scanOf(printOfChart(at.chart), at.chart, { seed: 31 }), 'png')
    return finished((await studio.agent.call('POST', `${studio.root}/wedges/${at.wedgeId}/readings`, { body: scanForm(bytes, fields) })).body)
  }
  async function finished(item: Reading): Promise<Reading> {
    while (item.state === 'waiting' || item.state === 'making') {
      await sleep(200)
      item = (await get(`readings/${item.id}`)).body
    }
    return item
  }

  it('takes the tone that its scanner was taught for the process, and names the profile', async () => {
    const scanner = (await post('scanners', { name: 'Flatbed by the door' })).body.id
    const at = await newWedge(studio)
    const plain = await scanned(at, { scannerId: scanner })
    expect(plain.scannerProfileId).toBeNull()
    const profile = (await post(`scanner-profiles/${scanner}`, { process: 'cyanotype', kind: 'grey-scale', points: profilePoints })).body
    expect((await get(`scanner-profiles/${scanner}`)).body.items).toEqual([profile])
    const taught = await finished((await post(`readings/${plain.id}/read-again`, { scannerId: scanner })).body)
    expect(taught.scannerProfileId).toBe(profile.id)
    // The teacher's scanner sees 5 + 0.94 L*, so what was read at 52 is 50; beyond its greys the ends' shift holds.
    const [from, to] = [5 + 0.94 * 15, 5 + 0.94 * 95]
    const expected = plain.patches.map(({ lightness: seen }) => seen! - from < 0 ? seen! - from + 15 : seen! > to ? seen! - to + 95 : (seen! - 5) / 0.94)
    taught.patches.forEach(({ lightness }, i) => expect(lightness).toBeCloseTo(expected[i]!, 1))
    expect((await studio.agent.delete(`${studio.root}/scanner-profiles/${scanner}/${profile.id}`)).status).toBe(204)
    expect((await get(`scanner-profiles/${scanner}`)).body.items).toEqual([])
  })

  it('tells how even its print is, and why it came out so: a trial of the trade, full ink 88 with foil 95, and both 88', async () => {
    const item = await scanned(await newWedge(studio))
    const { evenness, check, inkTrial } = (await get(`readings/${item.id}/findings`)).body
    expect(evenness.mottle).toBeGreaterThan(0)
    expect(evenness.mottle).toBeLessThan(3)
    expect([check, inkTrial]).toEqual([null, null])
    const withPlaces = async (foil: number, fullInk: number): Promise<{ code: string, message: string, evidence: string }[]> => {
      const place = (lightness: number) => ({ lightness, lab: [lightness, 0, 0], deviation: 1 })
      const evidence = { ...item.evidence, edgeWidthMm: null, references: [{ fullInk: place(fullInk), clear: place(22) }], diagnostics: { foil: place(foil), bare: null, uncoated: null } }
      await sql('update readings set evidence = $2 where id = $1', [item.id, JSON.stringify(evidence)])
      return (await get(`readings/${item.id}/findings`)).body.causes
    }
    expect(await withPlaces(95, 88)).toMatchObject([{ code: 'more-ink', message: expect.stringContaining('ink lets UV through'), evidence: 'under full ink 88.0 L*, under foil 95.0 L*' }])
    expect(await withPlaces(88, 88)).toMatchObject([{ code: 'wash', message: expect.stringMatching(/^Stain or wash.*leave the ink alone/) }])
    expect(await withPlaces(95, 95)).toEqual([])
  })
})

describe('a reading of a guide', () => {
  type GuidePatch = { level: number, tone?: number, exposure?: number, density?: number, inkColor?: string }
  /** A finished scan of a film without the picture: what stands in its patches decides their lightness. */
  async function storedReading(bench: string, wedge: { id: string, patches: GuidePatch[] }, lightnessOf: (patch: GuidePatch, i: number) => number): Promise<string> {
    const id = uuidv7()
    const patches = wedge.patches.map((patch, i) => ({ level: patch.level, lightness: lightnessOf(patch, i), lab: null, deviation: 1, used: true }))
    await sql(`insert into readings (studio_id, id, bench_id, state, quality, patches, wedge_id, body_hash, ready_at) values ($1, $2, $3, 'ready', 'scan', $4, $5, 'test', now())`,
      [studio.ids.studio, id, bench, JSON.stringify(patches), wedge.id])
    return id
  }
  const page = { widthMm: 210, heightMm: 297 }

  it('of an exposure strip gives the base exposure, and is refused as another guide', async () => {
    const bench = await newBench()
    const strip = (await post(`benches/${bench}/wedges`, { page, kind: 'exposure-strip', exposureStrip: { firstExposure: 20, unit: 's' } })).body
    const readingId = await storedReading(bench, strip, ({ exposure }) => lightnessAfter(exposure!))
    const { status, body } = await post(`benches/${bench}/base-exposures`, { readingId })
    expect(status, JSON.stringify(body)).toBe(201)
    expect(Math.abs(Math.log2(body.exposureSeconds / 313))).toBeLessThan(0.3)
    expect(body.readingId).toBe(readingId)
    expect(await post(`benches/${bench}/tablets`, { readingId })).toMatchObject({ status: 422, body: { data: { issues: [{ path: 'readingId' }] } } })
    expect(await studio.agent.delete(`${studio.root}/readings/${readingId}`)).toMatchObject({ status: 409, body: { data: { code: 'wrong_state' } } })
  })

  it('of an exposure strip is taken as a picture too', async () => {
    const bench = await newBench()
    // What the lamp does to each window is put into the film, so that one simulator prints guides too.
    const plan = { kind: 'exposure-strip' as const, grid: '24x16' as const, strip: { firstExposure: 20, unit: 's' as const, steps: 10, stopsPerStep: 0.5 } }
    const strip = (await post(`benches/${bench}/wedges`, { page, kind: 'exposure-strip', exposureStrip: { firstExposure: 20, unit: 's' } })).body
    const chart = chartOf(plan, strip.pixelsPerInch)
    const print = { page: chart.page, levels: chart.patches.map(({ exposure }) => (lightnessAfter(exposure!) - 15) / 80), code: strip.code }
    const picture = scanOf(printOfChart(print, { lightnessOf: level => 15 + 80 * level, gradientLightness: 0, mottleLightness: 0, textureLightness: 1 }), print)
    const { status, body } = await studio.agent.call('POST', `${studio.root}/benches/${bench}/base-exposures`, { body: scanForm(await scanFile(picture)) })
    expect(status, JSON.stringify(body)).toBe(201)
    expect(Math.abs(Math.log2(body.exposureSeconds / 313))).toBeLessThan(0.3)
    expect((await get(`readings/${body.readingId}`)).body).toMatchObject({ state: 'ready', wedgeId: strip.id })
  })

  it('of a step tablet gives the paper’s scale', async () => {
    const bench = await newBench()
    const guide = (await post(`benches/${bench}/wedges`, { page, kind: 'step-tablet', tablet: { steps: 21, stepWidthMm: 6, stepHeightMm: 12 } })).body
    const { status, body } = await post(`benches/${bench}/tablets`, { readingId: await storedReading(bench, guide, ({ density }) => lightnessAfter(600 * 10 ** -density!)) })
    expect(status, JSON.stringify(body)).toBe(201)
    expect(Math.abs(body.exposureScale - 1.132)).toBeLessThan(0.05)
  })

  it('of an ink trial names the mix that blocks just enough', async () => {
    const bench = await newBench()
    const inkMixes = ['#202020', '#804000', '#000000']
    const trial = (await post(`benches/${bench}/wedges`, { page, kind: 'ink-trial', inkMixes })).body
    const fullInk: Record<string, number> = { '#202020': 0.7, '#804000': 2.5, '#000000': 5 }
    const reading = await storedReading(bench, trial, ({ level, inkColor }, i) => lightnessAfter(400 * 10 ** -(fullInk[inkColor!]! * level)) + 0.2 * Math.sin(7 * i))
    const { inkTrial } = (await get(`readings/${reading}/findings`)).body
    expect(inkTrial).toMatchObject({ recommended: '#804000', why: expect.stringContaining('#804000'), mixes: [{ inkColor: '#202020', whiteFrom: null }, {}, {}] })
    expect(inkTrial.mixes[1].whiteFrom).toBeGreaterThan(inkTrial.mixes[2].whiteFrom)
  })

  it('of a wedge through a curve shows how evenly it came out', async () => {
    const bench = await newBench()
    const curveId = await newCurve(bench)
    const wedge = (await post(`benches/${bench}/wedges`, { page, throughCurveId: curveId })).body
    const { blackLightness: black, whiteLightness: white } = (await get(`curves/${curveId}`)).body
    const reading = await storedReading(bench, wedge, ({ tone }, i) => black + tone! * (white - black) + 2 * Math.sin(Math.PI * tone!) + 0.3 * Math.sin(7 * i))
    const { check } = (await get(`readings/${reading}/findings`)).body
    expect(check.greatest).toBeCloseTo(2, 0)
    expect(Math.abs(check.greatestAtTone - 0.5)).toBeLessThan(0.2)
    expect(check.points).toHaveLength(33)
    expect(check.noiseAlone.p95).toBeLessThan(1)
  })
})
