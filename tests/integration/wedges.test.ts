// Film files are read back by libvips' and poppler's own programs; expected codes are the contract's formula on the wedge's own patches.
import { execFileSync } from 'node:child_process'
import { mkdtempSync, readFileSync, rmSync, writeFileSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { v7 as uuidv7 } from 'uuid'
import { afterAll, describe, expect, it } from 'vitest'
import { filmAt } from '../support/negatives'
import { newPersonIn } from '../support/people'
import { newStudio } from '../support/studio'
import { newBench, newWedge } from '../support/wedges'

const folder = mkdtempSync(join(tmpdir(), 'emulside-wedges-'))
afterAll(() => rmSync(folder, { recursive: true, force: true }))

interface Patch { level: number, tone?: number, xMm: number, yMm: number, widthMm: number, heightMm: number, exposure?: number, density?: number, inkColor?: string }

/** 16-bit samples of a film file, read by libvips. */
function samplesOf(film: Buffer, name: string): Uint16Array {
  const [file, raw] = [join(folder, name), join(folder, `${name}.raw`)]
  writeFileSync(file, film)
  execFileSync('vips', ['rawsave', file, raw])
  const bytes = readFileSync(raw)
  return new Uint16Array(bytes.buffer.slice(bytes.byteOffset, bytes.byteOffset + bytes.length))
}

describe('a wedge', () => {
  it('is laid out for its bench: code, sheet, resolution and ink as they are now, patches in the sheet’s millimetres', async () => {
    const studio = await newStudio()
    const bench = await newBench(studio, { path: { pixelsPerInch: 300, fileKind: 'tiff', mediaType: 'Glossy film' }, ink: { color: '#20A040' } })
    const wedge = await newWedge(studio, { benchId: bench.id, page: { widthMm: 210, heightMm: 297 } })
    expect(wedge).toMatchObject({ benchId: bench.id, kind: 'scattered', page: { widthMm: 210, heightMm: 297 }, pixelsPerInch: 300, inkColor: '#20A040', path: bench.path, renders: [], printCount: 0, throughCurveId: null })
    expect(wedge.code).toMatch(/^[2-9A-HJ-NP-Z]{10}$/)
    expect(wedge.patches).toHaveLength(576)
    for (const { xMm, yMm, widthMm, heightMm } of wedge.patches as Patch[]) {
      expect(xMm >= 0 && yMm >= 0 && xMm + widthMm <= 210 && yMm + heightMm <= 297).toBe(true)
      // 7 mm, to half a pixel at each edge
      expect(Math.abs(widthMm - 7)).toBeLessThanOrEqual(25.4 / 300)
    }
    await studio.agent.patch(`${studio.root}/benches/${bench.id}`, { revision: bench.revision, path: { pixelsPerInch: 720 } })
    expect((await studio.agent.get(`${studio.root}/wedges/${wedge.id}`)).body).toEqual(wedge)
  })

  it('answers the same id and body with the stored one, and another body with 409', async () => {
    const studio = await newStudio()
    const bench = await newBench(studio)
    const path = `${studio.root}/benches/${bench.id}/wedges`
    const body = { id: uuidv7(), page: { widthMm: 150, heightMm: 115 } }
    const [first, again, other] = [await studio.agent.post(path, body), await studio.agent.post(path, body), await studio.agent.post(path, { ...body, pixelsPerInch: 300 })]
    expect([first.status, again.status, other.status]).toEqual([201, 200, 409])
    expect(again.body).toEqual(first.body)
  })

  it('takes the sheet on its other side where it fits only so', async () => {
    const wedge = await newWedge(await newStudio(), { page: { widthMm: 127, heightMm: 178 } })
    expect(wedge.page).toEqual({ widthMm: 178, heightMm: 127 })
  })

  it('goes through a curve of its bench: tones in its patches, the curve’s levels on its film', async () => {
    const studio = await newStudio()
    const bench = await newBench(studio)
    const values = Array.from({ length: 21 }, (_, i) => ({ level: i / 20, value: 22 + 72 * (i / 20) ** 1.4 }))
    const reading = (await studio.agent.post(`${studio.root}/benches/${bench.id}/readings`, { unit: 'lightness', values })).body
    const curve = (await studio.agent.post(`${studio.root}/benches/${bench.id}/curves`, { readingIds: [reading.id] })).body
    const wedge = await newWedge(studio, { benchId: bench.id, throughCurveId: curve.id })
    for (const { tone, level } of wedge.patches as Patch[]) {
      const place = tone! * 1024
      const [below, above] = [curve.points[Math.floor(place)], curve.points[Math.min(1024, Math.floor(place) + 1)]]
      expect(level).toBeCloseTo(below.level + (above.level - below.level) * (place - Math.floor(place)), 9)
    }
    const other = await newBench(studio)
    expect((await studio.agent.post(`${studio.root}/benches/${other.id}/wedges`, { page: { widthMm: 150, heightMm: 115 }, throughCurveId: curve.id })).body.data.code).toBe('invalid_input')
  })

  it('is refused on the service’s own benches and on one that was put away', async () => {
    const studio = await newStudio()
    const starter = (await studio.agent.post(`${studio.root}/starter-benches`, { process: 'salt' })).body
    const away = await newBench(studio)
    await studio.agent.post(`${studio.root}/benches/${away.id}/archive`, { revision: 1 })
    for (const [id, code] of [[starter.id, 'combination_fixed'], [away.id, 'wrong_state']]) {
      const answer = await studio.agent.post(`${studio.root}/benches/${id}/wedges`, { page: { widthMm: 210, heightMm: 297 } })
      expect([answer.status, answer.body.data.code]).toEqual([409, code])
      expect(answer.body.message).toMatch(/Make a copy of it/)
    }
  })

  it.each([
    ['numbered', { steps: 31 }, 62, {}],
    ['ink-trial', { inkMixes: ['#000000', '#203040', '#402010'] }, 384, { inkColor: '#000000' }],
    ['ink-load', {}, 11, { level: 1 }],
    ['exposure-strip', { exposureStrip: { firstExposure: 60 } }, 20, { level: 0, exposure: 60 }],
    ['step-tablet', { tablet: { stepWidthMm: 6, stepHeightMm: 14 } }, 21, { level: 0, density: 0 }],
  ])('can be a %s', async (kind, fields, count, patch) => {
    const studio = await newStudio()
    const wedge = await newWedge(studio, { page: { widthMm: 210, heightMm: 148.5 }, kind, ...fields })
    expect(wedge.patches).toHaveLength(count)
    expect(wedge.patches).toEqual(expect.arrayContaining([expect.objectContaining(patch)]))
    const listed = (await studio.agent.get(`${studio.root}/benches/${wedge.benchId}/wedges?kind=${kind}`)).body.items
    const { patches: _, ...brief } = wedge
    expect(listed).toEqual([brief])
    expect((await studio.agent.get(`${studio.root}/benches/${wedge.benchId}/wedges?kind=scattered`)).body.items).toEqual([])
  })

  it('is put away from the list, and stays for its prints', async () => {
    const studio = await newStudio()
    const wedge = await newWedge(studio)
    expect((await studio.agent.delete(`${studio.root}/wedges/${wedge.id}`)).status).toBe(204)
    expect((await studio.agent.get(`${studio.root}/benches/${wedge.benchId}/wedges`)).body.items).toEqual([])
    expect((await studio.agent.get(`${studio.root}/wedges/${wedge.id}`)).body.archivedAt).not.toBeNull()
  })
})

describe('a wedge’s film', () => {
  it('is made once, mirrored, each patch’s middle in its level’s code, and is kept', async () => {
    const studio = await newStudio()
    const wedge = await newWedge(studio, { pixelsPerInch: 300 })
    const path = `${studio.root}/wedges/${wedge.id}/file?format=tiff`
    const { status, headers, bytes } = await filmAt(studio.agent, path)
    expect([status, headers.get('content-type')]).toEqual([200, 'image/tiff'])
    expect(headers.get('content-disposition')).toContain('150 x 115 mm, 300 ppi.tiff')
    const film = samplesOf(bytes, 'wedge.tiff')
    const width = Math.round(150 / 25.4 * 300)
    for (const { level, xMm, yMm, widthMm, heightMm } of wedge.patches as Patch[]) {
      const [x, y] = [Math.floor((xMm + widthMm / 2) / 25.4 * 300), Math.floor((yMm + heightMm / 2) / 25.4 * 300)]
      expect(film[y * width + width - 1 - x]).toBe(Math.round(65535 * (1 - level)))
    }
    const after = (await studio.agent.get(`${studio.root}/wedges/${wedge.id}`)).body
    expect(after.renders).toMatchObject([{ format: 'tiff', state: 'ready', bytes: bytes.length }])

    const known = await studio.agent.fetch('GET', path, { headers: { 'if-none-match': headers.get('etag')! } })
    expect(known.status).toBe(304)
    const part = await studio.agent.fetch('GET', path, { headers: { range: 'bytes=0-3' } })
    expect([part.status, Buffer.from(await part.arrayBuffer()).toString('latin1')]).toEqual([206, bytes.toString('latin1', 0, 4)])
    const head = await studio.agent.fetch('HEAD', path)
    expect([head.status, Number(head.headers.get('content-length'))]).toEqual([200, bytes.length])
  })

  it('is a page of the sheet’s size as a PDF', async () => {
    const studio = await newStudio()
    const wedge = await newWedge(studio, { page: { widthMm: 210, heightMm: 297 }, kind: 'exposure-strip', exposureStrip: { firstExposure: 30 }, pixelsPerInch: 300 })
    const { bytes } = await filmAt(studio.agent, `${studio.root}/wedges/${wedge.id}/file`)
    writeFileSync(join(folder, 'strip.pdf'), bytes)
    expect(execFileSync('pdfinfo', [join(folder, 'strip.pdf')], { encoding: 'utf8' })).toMatch(/Page size:\s+595\.276 x 841\.89 pts \(A4\)/)
  })

  it('is not mirrored where the bench is not', async () => {
    const studio = await newStudio()
    const bench = await newBench(studio, { process: 'carbon' })
    const wedge = await newWedge(studio, { benchId: bench.id, pixelsPerInch: 300 })
    const film = samplesOf((await filmAt(studio.agent, `${studio.root}/wedges/${wedge.id}/file?format=png`)).bytes, 'carbon.png')
    const { level, xMm, yMm } = (wedge.patches as Patch[])[17]!
    expect(film[Math.floor((yMm + 3) / 25.4 * 300) * Math.round(150 / 25.4 * 300) + Math.floor((xMm + 3) / 25.4 * 300)]).toBe(Math.round(65535 * (1 - level)))
  })

  it('has a preview', async () => {
    const studio = await newStudio()
    const wedge = await newWedge(studio)
    const answer = await studio.agent.fetch('GET', `${studio.root}/wedges/${wedge.id}/preview?width=300`)
    expect([answer.status, answer.headers.get('content-type')]).toEqual([200, 'image/png'])
    const bytes = Buffer.from(await answer.arrayBuffer())
    // PNG's header: width and height stand at bytes 16 and 20 (ISO/IEC 15948, clause 11.2.2).
    expect([bytes.readUInt32BE(16), bytes.readUInt32BE(20)]).toEqual([300, 230])
  })
})

describe('prints of a wedge', () => {
  it('are numbered one after the other, and tell how long they have dried', async () => {
    const studio = await newStudio()
    const wedge = await newWedge(studio)
    const path = `${studio.root}/wedges/${wedge.id}/prints`
    const first = await studio.agent.post(path, { exposure: { value: 480, unit: 's' }, driedSince: new Date(Date.now() - 90 * 60_000).toISOString(), notes: 'Brushed across.' })
    expect(first.body).toMatchObject({ wedgeId: wedge.id, benchId: wedge.benchId, number: 1, exposure: { value: 480, unit: 's' }, notes: 'Brushed across.', revision: 1 })
    expect(first.body.driedHours).toBeCloseTo(1.5, 1)
    expect((await studio.agent.post(path, { number: 5 })).body).toMatchObject({ number: 5, exposure: null, driedSince: null, driedHours: null })
    const both = await Promise.all([studio.agent.post(path, {}), studio.agent.post(path, {})])
    expect(both.map(answer => answer.body.number).sort()).toEqual([6, 7])
    const taken = await studio.agent.post(path, { number: 5 })
    expect([taken.status, taken.body.data.code]).toEqual([422, 'invalid_input'])
    expect((await studio.agent.get(path)).body.items.map((print: { number: number }) => print.number).sort()).toEqual([1, 5, 6, 7])
    expect((await studio.agent.get(`${studio.root}/wedges/${wedge.id}`)).body.printCount).toBe(4)
  })

  it('answer the same id and body with the stored one', async () => {
    const studio = await newStudio()
    const path = `${studio.root}/wedges/${(await newWedge(studio)).id}/prints`
    const body = { id: uuidv7(), notes: 'North window.' }
    const [first, again, other] = [await studio.agent.post(path, body), await studio.agent.post(path, body), await studio.agent.post(path, { ...body, notes: 'South.' })]
    expect([first.status, again.status, other.status]).toEqual([201, 200, 409])
    expect(again.body.number).toBe(1)
  })

  it('can be corrected', async () => {
    const studio = await newStudio()
    const print = (await studio.agent.post(`${studio.root}/wedges/${(await newWedge(studio)).id}/prints`, { exposure: { value: 10, unit: 'dose' } })).body
    const path = `${studio.root}/wedge-prints/${print.id}`
    const hung = await studio.agent.patch(path, { revision: 1, driedSince: '2026-03-01T18:00:00.000Z' })
    expect(hung.body).toMatchObject({ exposure: { value: 10, unit: 'dose' }, driedSince: '2026-03-01T18:00:00.000Z', revision: 2 })
    expect((await studio.agent.patch(path, { revision: 2, exposure: null, driedSince: null })).body).toMatchObject({ exposure: null, driedSince: null })
  })

  it('fix the bench’s combination, which a wedge on film alone does not', async () => {
    const studio = await newStudio()
    const wedge = await newWedge(studio)
    const path = `${studio.root}/benches/${wedge.benchId}`
    expect((await studio.agent.patch(path, { revision: 1, recipe: { coats: 2 } })).status).toBe(200)
    await studio.agent.post(`${studio.root}/wedges/${wedge.id}/prints`, {})
    const answer = await studio.agent.patch(path, { revision: 2, recipe: { coats: 1 } })
    expect([answer.status, answer.body.data.code]).toEqual([409, 'combination_fixed'])
  })

  it('are a technician’s to make and a member’s to read', async () => {
    const studio = await newStudio()
    const wedge = await newWedge(studio)
    const { agent } = await newPersonIn(studio.ids.studio, 'member')
    expect((await agent.get(`${studio.root}/wedges/${wedge.id}/prints`)).status).toBe(200)
    expect((await agent.post(`${studio.root}/wedges/${wedge.id}/prints`, {})).status).toBe(403)
  })
})
