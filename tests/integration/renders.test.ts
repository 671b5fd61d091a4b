import { createHash } from 'node:crypto'
import { existsSync, readFileSync, rmSync, writeFileSync } from 'node:fs'
import { join } from 'node:path'
import sharp from 'sharp'
import { describe, expect, it } from 'vitest'
import { withDatabase } from '../support/database'
import { filmOf, newNegative, newPhoto } from '../support/negatives'
import { application, newStudio } from '../support/studio'

const sha256 = (bytes: Buffer) => createHash('sha256').update(bytes).digest('hex')

describe('a film file', () => {
  it('is made on demand and served with its hash, its name and the wanted pixels', async () => {
    const studio = await newStudio()
    const negative = await newNegative(studio)
    const asked = await studio.agent.get(`${studio.root}/negatives/${negative.id}/file?format=tiff`)
    expect([asked.status, asked.headers.get('retry-after')]).toEqual([202, '1'])
    expect(['waiting', 'making']).toContain(asked.body.state)

    const film = await filmOf(studio, negative.id)
    expect([film.status, film.headers.get('content-type'), film.headers.get('content-length')]).toEqual([200, 'image/tiff', String(film.bytes.length)])
    expect(film.headers.get('content-disposition')).toContain('filename="weir - Cyanotype, starter - 60 x 40 mm, 360 ppi.tiff"')
    const { width, height, depth, channels } = await sharp(film.bytes).metadata()
    // By hand: 60 and 40 mm at 360 pixels per inch are 850.4 and 566.9.
    expect({ width, height, depth, channels }).toEqual({ width: 850, height: 567, depth: 'ushort', channels: 1 })
    const [render] = (await studio.agent.get(`${studio.root}/negatives/${negative.id}`)).body.renders
    expect(render).toMatchObject({ format: 'tiff', state: 'ready', progress: 1, bytes: film.bytes.length, sha256: sha256(film.bytes), error: null })
  })

  it.each(['png', 'pdf'] as const)('is made as %s too', async (format) => {
    const studio = await newStudio()
    const film = await filmOf(studio, (await newNegative(studio)).id, format)
    expect(film.bytes.subarray(0, 5).toString('latin1')).toBe(format === 'pdf' ? '%PDF-' : '\u0089PNG\r')
  })

  it('answers tags, ranges and heads', async () => {
    const studio = await newStudio()
    const { id } = await newNegative(studio)
    const film = await filmOf(studio, id)
    const path = `${studio.root}/negatives/${id}/file?format=tiff`
    const etag = film.headers.get('etag')!
    expect(etag).toMatch(/^"[0-9a-f]{64}"$/)
    const head = await studio.agent.call('HEAD', path)
    expect([head.status, head.headers.get('etag'), head.headers.get('content-length'), head.text]).toEqual([200, etag, String(film.bytes.length), ''])
    const known = await studio.agent.call('GET', path, { headers: { 'if-none-match': etag } })
    expect([known.status, known.text]).toEqual([304, ''])
    const part = await studio.agent.fetch('GET', path, { headers: { 'range': 'bytes=100-199', 'if-range': etag } })
    expect(part.status).toBe(206)
    expect(Buffer.from(await part.arrayBuffer()).equals(film.bytes.subarray(100, 200))).toBe(true)
    const outdated = await studio.agent.call('HEAD', path, { headers: { 'range': 'bytes=100-199', 'if-range': '"other"' } })
    expect(outdated.status).toBe(200)
    expect((await studio.agent.call('GET', path, { headers: { range: 'bytes=99999999-' } })).status).toBe(416)
    expect((await studio.agent.get(`${studio.root}/negatives/${id}/file?format=bmp`)).status).toBe(422)
  })

  it('is shared by negatives with equal settings', async () => {
    const studio = await newStudio()
    const photo = await newPhoto(studio)
    const [one, two] = [await newNegative(studio, { photoId: photo.id, name: 'One' }), await newNegative(studio, { photoId: photo.id, name: 'Two' })]
    const [filmOne, filmTwo] = [await filmOf(studio, one.id), await filmOf(studio, two.id)]
    expect(filmTwo.states).toEqual([])
    expect(filmTwo.headers.get('etag')).toBe(filmOne.headers.get('etag'))
    const rows = await withDatabase(sql => sql('select id from renders where studio_id = $1', [studio.ids.studio]))
    expect(rows).toHaveLength(1)
  })

  it('has the same bytes when it is made again after it left the cache', async () => {
    const studio = await newStudio()
    const { id } = await newNegative(studio, { margin: { mm: 8, kind: 'clear' }, marks: { ruler: true, label: true } })
    for (const format of ['tiff', 'png', 'pdf'] as const) {
      const first = await filmOf(studio, id, format)
      await withDatabase(sql => sql('delete from renders where studio_id = $1', [studio.ids.studio]))
      rmSync(join(application().storage, 'films', studio.ids.studio), { recursive: true })
      const again = await filmOf(studio, id, format)
      expect(again.states.length).toBeGreaterThan(0)
      expect(sha256(again.bytes)).toBe(sha256(first.bytes))
    }
  })

  it('is made again when its file got lost though its row says ready', async () => {
    const studio = await newStudio()
    const { id } = await newNegative(studio)
    const first = await filmOf(studio, id)
    rmSync(join(application().storage, 'films', studio.ids.studio), { recursive: true })
    const again = await filmOf(studio, id)
    expect(again.states.length).toBeGreaterThan(0)
    expect(again.bytes.equals(first.bytes)).toBe(true)
  })

  it('that can’t be made says why, and can be tried again', async () => {
    const studio = await newStudio()
    const negative = await newNegative(studio)
    const original = join(application().storage, 'originals', studio.ids.studio, negative.photoId)
    expect(existsSync(original)).toBe(true)
    const bytes = readFileSync(original)
    writeFileSync(original, 'no picture any more')
    const failed = await filmOf(studio, negative.id)
    expect(failed.status).toBeGreaterThanOrEqual(400)
    expect(failed.status).toBeLessThan(500)
    expect((await studio.agent.get(`${studio.root}/negatives/${negative.id}`)).body.renders).toMatchObject([{ state: 'failed', error: { code: expect.any(String) } }])

    writeFileSync(original, bytes)
    const retried = await studio.agent.post(`${studio.root}/negatives/${negative.id}/renders`, { format: 'tiff' })
    expect([retried.status, retried.body.state]).toEqual([202, 'waiting'])
    expect((await filmOf(studio, negative.id)).status).toBe(200)
  })
})
