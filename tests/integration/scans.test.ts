import { setTimeout as sleep } from 'node:timers/promises'
import { beforeAll, describe, expect, it } from 'vitest'
import sharp from 'sharp'
import type { Reading } from '../../shared/schemas/curves'
import { newPicture } from '../support/pictures'
import { newStudio } from '../support/studio'
import { type Chart, newWedge, printOfChart, printTone, scanFile, scanForm, scanOf, type ScanFormat } from '../support/wedge-scans'
import type { SimulatedPrint } from '../support/scan-simulator/print'

/** Root mean square of what patches differ by, L*. */
function rms(a: (number | null)[], b: (number | null)[]): number {
  const differences = a.map((value, i) => value! - b[i]!)
  return Math.sqrt(differences.reduce((sum, d) => sum + d * d, 0) / a.length)
}
const lightnesses = ({ patches }: Reading) => patches.map(({ lightness }) => lightness)
const codesOf = ({ warnings }: Reading) => warnings.map(({ code }) => code)

let studio: Awaited<ReturnType<typeof newStudio>>
let at: { benchId: string, wedgeId: string, chart: Chart }
let print: SimulatedPrint

beforeAll(async () => {
  studio = await newStudio()
  at = await newWedge(studio)
  print = printOfChart(at.chart)
})

/** Hands a scan in and waits for its reading. */
async function handIn(bytes: Buffer, { fields, to = `wedges/${at.wedgeId}`, name }: { fields?: Record<string, string>, to?: string, name?: string } = {}) {
  const answer = await studio.agent.call('POST', `${studio.root}/${to}/readings`, { body: scanForm(bytes, fields, name) })
  let item = answer.body as Reading
  while (item.state === 'waiting' || item.state === 'making') {
    await sleep(200)
    item = (await studio.agent.get(`${studio.root}/readings/${item.id}`)).body
  }
  return { status: answer.status, item, body: answer.body }
}

describe('a scan of a wedge print', () => {
  it.each<ScanFormat>(['jpeg', 'png', 'tiff', 'tiff16'])('is read from a %s file: every patch, in the wedge’s order, with what stands beside it', async (format) => {
    const { status, item } = await handIn(await scanFile(scanOf(print, at.chart, { seed: 10 }), format))
    expect([200, 201, 202]).toContain(status)
    expect(item).toMatchObject({ state: 'ready', quality: 'scan', wedgeId: at.wedgeId, error: null, progress: 1 })
    expect(item.patches.map(({ level }) => level)).toEqual(at.chart.levels)
    // The print's own texture, mottle and gradient are within 1 L* of its tone.
    expect(rms(lightnesses(item), at.chart.levels.map(printTone))).toBeLessThan(1)
    expect(item.evidence).toMatchObject({ code: at.chart.code, mirrored: false, inverted: false, markersSeen: at.chart.page.markers.length })
    expect(item.evidence!.pixelsPerInch).toBeGreaterThan(197)
    expect(item.evidence!.pixelsPerInch).toBeLessThan(203)
    expect(item.evidence!.cells).toHaveLength(at.chart.levels.length)
    expect(item.file).toMatchObject({ name: 'wedge print', format: format.replace('16', '') })
    expect(codesOf(item).filter(code => code !== 'same_print')).toEqual([])
  })

  it('is read from a phone’s HEIC file, and marked as a phone’s', async () => {
    const { item } = await handIn(await scanFile(scanOf(print, at.chart, { seed: 20 }), 'heic'), { name: 'IMG_0001.HEIC' })
    expect(item).toMatchObject({ state: 'ready', quality: 'phone', file: { format: 'heic', name: 'IMG_0001' } })
    expect(codesOf(item)).toContain('phone')
    expect(rms(lightnesses(item), at.chart.levels.map(printTone))).toBeLessThan(1.5)
  })

  it('reads the same turned half a circle or lying on its side, and counts as the same print', async () => {
    const readings = []
    for (const quarterTurns of [0, 1, 2, 3]) readings.push((await handIn(await scanFile(scanOf(print, at.chart, { quarterTurns, seed: 30 + quarterTurns })))).item)
    for (const item of readings.slice(1)) expect(rms(lightnesses(item), lightnesses(readings[0]!))).toBeLessThan(0.2)
    expect(new Set(readings.map(({ wedgePrintId }) => wedgePrintId)).size).toBe(1)
    expect(readings.map(({ evidence }) => Math.round(evidence!.turnedDegrees / 90))).toEqual([0, 1, 2, -1].map(turns => turns === 2 ? expect.toSatisfy((v: number) => Math.abs(v) === 2) : turns))
  })

  it('of another print is another sample, unless its number says otherwise', async () => {
    const place = await newWedge(studio)
    const [first, second] = [1, 2].map(seed => scanOf(printOfChart(place.chart, { seed: 100 * seed }), place.chart, { seed }))
    const to = `wedges/${place.wedgeId}`
    const one = (await handIn(await scanFile(first!), { to })).item
    const two = (await handIn(await scanFile(second!), { to })).item
    expect([one.printNumber, two.printNumber]).toEqual([1, 2])
    expect(codesOf(two)).toEqual([])
    const claimed = (await handIn(await scanFile(first!, 'png'), { to, fields: { printNumber: '7' } })).item
    expect(claimed.printNumber).toBe(7)
    expect(codesOf(claimed)).toEqual(['looks_like_print'])
  })

  it('goes to a print that was noted and not scanned yet', async () => {
    const place = await newWedge(studio)
    const noted = await studio.agent.post(`${studio.root}/wedges/${place.wedgeId}/prints`, { number: 4 })
    const { item } = await handIn(await scanFile(scanOf(printOfChart(place.chart), place.chart)), { to: `wedges/${place.wedgeId}` })
    expect(item).toMatchObject({ wedgePrintId: noted.body.id, printNumber: 4 })
  })

  it('handed in twice, byte for byte, is one reading', async () => {
    const bytes = await scanFile(scanOf(print, at.chart, { seed: 40 }))
    const first = await handIn(bytes)
    const again = await handIn(bytes, { to: `benches/${at.benchId}` })
    expect([first.status, again.status]).toEqual([201, 200])
    expect(again.item.id).toBe(first.item.id)
  })
})

describe('a bench', () => {
  it('finds the wedge of a scan by the code on it', async () => {
    const { status, item } = await handIn(await scanFile(scanOf(print, at.chart, { seed: 50, quarterTurns: 3 })), { to: `benches/${at.benchId}` })
    expect([status, item.wedgeId]).toEqual([201, at.wedgeId])
  })

  it('sends a wedge of another bench there', async () => {
    const other = await newWedge(studio, { name: 'Attic bench' })
    const bytes = await scanFile(scanOf(printOfChart(other.chart), other.chart))
    for (const to of [`benches/${at.benchId}`, `wedges/${at.wedgeId}`]) {
      const { status, body } = await handIn(bytes, { to })
      expect(status).toBe(409)
      expect(body).toMatchObject({ data: { code: 'other_wedge' }, message: expect.stringContaining('Attic bench') })
    }
    expect((await studio.agent.get(`${studio.root}/benches/${other.benchId}/readings`)).body.items).toEqual([])
  })

  it('says that a code is unknown here', async () => {
    const elsewhere = await newStudio()
    const other = await newWedge(elsewhere)
    const { status, body } = await handIn(await scanFile(scanOf(printOfChart(other.chart), other.chart)), { to: `benches/${at.benchId}` })
    expect([status, body.data.code]).toEqual([422, 'wedge_unknown'])
  })
})

describe('a scanner’s profile', () => {
  it('takes the scanner’s own error out of what its scans say, for the bench’s process', async () => {
    const place = await newWedge(studio)
    // A scanner that shows everything darker than it is: by 8 L* in the middle, true at both ends.
    const seenAs = (lightness: number) => lightness - 8 * Math.sin(Math.PI * lightness / 100)
    const points = Array.from({ length: 21 }, (_, i) => ({ scanned: seenAs(5 * i), measured: 5 * i }))
    const scanner = (await studio.agent.post(`${studio.root}/scanners`, { name: 'Flatbed by the window' })).body.id as string
    const profile = await studio.agent.post(`${studio.root}/scanner-profiles/${scanner}`, { process: 'cyanotype', kind: 'grey-scale', points })
    expect(profile.status, profile.text).toBe(201)
    const wrong = printOfChart(place.chart, { lightnessOf: level => seenAs(printTone(level)), gradientLightness: 0, mottleLightness: 0 })
    const bytes = await scanFile(scanOf(wrong, place.chart), 'png')
    const { item } = await handIn(bytes, { to: `wedges/${place.wedgeId}`, fields: { scannerId: scanner } })
    expect(item).toMatchObject({ state: 'ready', scannerId: scanner, scannerProfileId: profile.body.id })
    expect(rms(lightnesses(item), place.chart.levels.map(printTone))).toBeLessThan(0.5)
    const without = await studio.agent.post(`${studio.root}/readings/${item.id}/read-again`, { scannerId: null })
    expect(without.body.scannerProfileId).toBeNull()
    expect(rms(lightnesses(without.body), place.chart.levels.map(printTone))).toBeGreaterThan(4)
  })
})

describe('what can’t be read', () => {
  it.each([
    ['no picture', Buffer.from('not a picture at all'), 415, 'not_an_image'],
    ['a TIFF that is cut off', Buffer.from('II*\0\x08\0\0\0'), 422, 'image_unreadable'],
  ])('%s is refused and leaves nothing', async (_, bytes, status, code) => {
    const before = (await studio.agent.get(`${studio.root}/benches/${at.benchId}/readings?limit=100`)).body.items.length
    const answer = await handIn(bytes)
    expect([answer.status, answer.body.data.code]).toEqual([status, code])
    expect((await studio.agent.get(`${studio.root}/benches/${at.benchId}/readings?limit=100`)).body.items).toHaveLength(before)
  })

  it('a picture without the wedge fails, keeps its file, and says what to do', async () => {
    const { status, item } = await handIn(await newPicture({ width: 900, height: 700 }))
    expect(status).toBe(201)
    expect(item).toMatchObject({ state: 'failed', error: { code: 'wedge_not_found', message: expect.stringContaining('four corners') }, file: { width: 900, height: 700 } })
    const picture = await studio.agent.fetch('GET', `${studio.root}/readings/${item.id}/picture?width=300`)
    expect(await sharp(Buffer.from(await picture.arrayBuffer())).metadata()).toMatchObject({ format: 'jpeg', width: 300 })
  })

  it('a scan that cuts off a strip of the print loses those patches only, and says so', async () => {
    const { width, height, codes } = scanOf(print, at.chart, { seed: 60, skewDegrees: 0.5 })
    const cut = sharp(Buffer.from(codes.buffer), { raw: { width, height, channels: 3 } }).extract({ left: 0, top: 0, width: Math.round(0.8 * width), height })
    const { item } = await handIn(await cut.png().toBuffer())
    expect(item.state).toBe('ready')
    expect(codesOf(item)).toContain('cropped')
    const missing = item.patches.filter(({ lightness }) => lightness === null)
    expect(missing.length).toBeGreaterThan(12)
    expect(missing.length).toBeLessThan(0.3 * item.patches.length)
    expect(missing.every(({ used }) => !used)).toBe(true)
  })
})

describe('a reading', () => {
  it('is read again with corners put by hand', async () => {
    const scan = scanOf(print, at.chart, { seed: 70 })
    const first = (await handIn(await scanFile(scan))).item
    const moved = first.corners!.map(([x, y]) => [x + 2, y - 2])
    const again = await studio.agent.post(`${studio.root}/readings/${first.id}/read-again`, { corners: moved })
    expect([again.status, again.body.state]).toEqual([200, 'ready'])
    expect(rms(lightnesses(again.body), lightnesses(first))).toBeLessThan(0.05)
    expect(again.body.wedgePrintId).toBe(first.wedgePrintId)
  })

  it('shows its picture with the cells, and gives its file back', async () => {
    const bytes = await scanFile(scanOf(print, at.chart, { seed: 80 }), 'png')
    const { item } = await handIn(bytes)
    const get = async (path: string) => Buffer.from(await (await studio.agent.fetch('GET', `${studio.root}/readings/${item.id}/${path}`)).arrayBuffer())
    expect((await get('file')).equals(bytes)).toBe(true)
    const [plain, drawn] = await Promise.all([get('picture?width=600'), get('picture?width=600&cells=true')])
    const { channels } = await sharp(await sharp(plain).composite([{ input: drawn, blend: 'difference' }]).toBuffer()).stats()
    expect(Math.max(...channels.map(({ max }) => max))).toBeGreaterThan(60)
  })

  it('can be removed until a curve rests on it', async () => {
    const place = await newWedge(studio)
    const { item } = await handIn(await scanFile(scanOf(printOfChart(place.chart), place.chart)), { to: `wedges/${place.wedgeId}` })
    const curve = await studio.agent.post(`${studio.root}/benches/${place.benchId}/curves`, { readingIds: [item.id] })
    expect(curve.status, curve.text).toBe(201)
    expect((await studio.agent.delete(`${studio.root}/readings/${item.id}`)).body).toMatchObject({ data: { code: 'wrong_state' } })
    const free = (await handIn(await scanFile(scanOf(printOfChart(place.chart), place.chart, { seed: 90 })), { to: `wedges/${place.wedgeId}` })).item
    expect((await studio.agent.delete(`${studio.root}/readings/${free.id}`)).status).toBe(204)
    expect((await studio.agent.get(`${studio.root}/readings/${free.id}/file`)).status).toBe(404)
  })
})
