import { createHash, randomBytes } from 'node:crypto'
import { existsSync, readdirSync } from 'node:fs'
import { join } from 'node:path'
import sharp from 'sharp'
import { describe, expect, it } from 'vitest'
import { withDatabase } from '../support/database'
import { newPicture, uploadForm } from '../support/pictures'
import { Agent, application, newStudio } from '../support/studio'

type Studio = Awaited<ReturnType<typeof newStudio>>

const upload = ({ agent, root }: Studio, files: [string, Uint8Array][], field?: string) => agent.call('POST', `${root}/photos`, { body: uploadForm(files, field) })
const listed = async ({ agent, root }: Studio, query = '') => (await agent.get(`${root}/photos${query}`)).body.items
const originals = ({ ids }: Studio) => {
  const folder = join(application().storage, 'originals', ids.studio)
  return existsSync(folder) ? readdirSync(folder) : []
}

describe('uploading', () => {
  it('takes a picture as it is, byte for byte', async () => {
    const studio = await newStudio()
    const bytes = await newPicture()
    const answer = await upload(studio, [['Weir at dawn.JPG', bytes]])
    expect(answer.status).toBe(201)
    const [photo] = answer.body.items
    expect(photo).toMatchObject({ name: 'Weir at dawn', format: 'jpeg', width: 480, height: 320, bytes: bytes.length, sha256: createHash('sha256').update(bytes).digest('hex'), binnedAt: null })
    const original = await studio.agent.fetch('GET', `${studio.root}/photos/${photo.id}/file`)
    expect(Buffer.from(await original.arrayBuffer()).equals(bytes)).toBe(true)
    expect(await listed(studio)).toEqual([photo])
  })

  it('takes the good ones of a batch and says which failed and why', async () => {
    const studio = await newStudio()
    const answer = await upload(studio, [['one.jpg', await newPicture()], ['notes.jpg', Buffer.from('not a picture')], ['two.png', await newPicture({ format: 'png' })], ['empty.jpg', Buffer.alloc(0)]])
    expect(answer.status).toBe(201)
    expect(answer.body.items.map((photo: { name: string }) => photo.name)).toEqual(['one', 'two'])
    expect(answer.body.refused.map(({ name, code }: { name: string, code: string }) => [name, code])).toEqual([['notes', 'not_an_image'], ['empty', 'not_an_image']])
  })

  it('turns a picture upright by its orientation tag', async () => {
    const studio = await newStudio()
    const { body } = await upload(studio, [['turned.jpg', await newPicture({ orientation: 6 })]])
    expect(body.items[0]).toMatchObject({ width: 320, height: 480, orientation: 6 })
    const thumbnail = await studio.agent.fetch('GET', `${studio.root}/photos/${body.items[0].id}/thumbnail`)
    const { width, height } = await sharp(Buffer.from(await thumbnail.arrayBuffer())).metadata()
    expect([width, height]).toEqual([320, 480])
  })

  it('cleans and bounds the name of the file', async () => {
    const studio = await newStudio()
    const { body } = await upload(studio, [[`${'long '.repeat(2000)}.jpg`, await newPicture()]])
    expect(body.items[0].name.length).toBeLessThanOrEqual(120)
  })
})

describe('uploading what can’t be taken', () => {
  const truncated = async (format: 'jpeg' | 'png') => {
    const whole = await newPicture({ format, width: 800, height: 600 })
    return whole.subarray(0, Math.floor(whole.length / 2))
  }
  /** A PNG whose header claims 65 000 × 65 000 pixels. */
  const hostile = async () => {
    const png = Buffer.from(await newPicture({ format: 'png' }))
    png.writeUInt32BE(65_000, 16)
    png.writeUInt32BE(65_000, 20)
    return png
  }
  it.each([
    ['something that is no picture', async () => Buffer.from('%PDF-1.7 not a photo'), [415], ['not_an_image']],
    ['random bytes', async () => randomBytes(5000), [415], ['not_an_image']],
    ['an empty file', async () => Buffer.alloc(0), [415], ['not_an_image']],
    ['half a JPEG', () => truncated('jpeg'), [415, 422], ['image_unreadable', 'not_an_image']],
    ['half a PNG', () => truncated('png'), [415, 422], ['image_unreadable', 'not_an_image']],
    ['a header that claims a giant', hostile, [413, 415, 422], ['picture_too_large', 'image_unreadable', 'not_an_image']],
  ])('answers %s with a 4xx and stores nothing', async (_, make, statuses, codes) => {
    const studio = await newStudio()
    const answer = await upload(studio, [['picture.jpg', await make()]])
    expect(statuses).toContain(answer.status)
    expect(codes).toContain(answer.body.data.code)
    expect(answer.body.message.length).toBeGreaterThan(20)
    expect(await listed(studio)).toEqual([])
    expect(originals(studio)).toEqual([])
    expect((await upload(studio, [['good.jpg', await newPicture()]])).status).toBe(201)
  })

  it('answers another field, no part, and another kind of body with a 4xx', async () => {
    const studio = await newStudio()
    expect((await upload(studio, [['a.jpg', await newPicture()]], 'picture')).body.data.code).toBe('invalid_input')
    expect((await upload(studio, [])).status).toBeGreaterThanOrEqual(400)
    expect((await studio.agent.post(`${studio.root}/photos`, { file: 'a.jpg' })).body.data.code).toBe('unsupported_media')
    expect(await listed(studio)).toEqual([])
  })

  it('keeps to the studio’s bytes', async () => {
    const studio = await newStudio()
    const [first, second] = [await newPicture(), await newPicture()]
    await withDatabase(sql => sql('update studios set max_bytes = $1 where id = $2', [first.length + second.length - 1, studio.ids.studio]))
    const answer = await upload(studio, [['first.jpg', first], ['second.jpg', second]])
    expect(answer.status).toBe(201)
    expect(answer.body.refused).toMatchObject([{ name: 'second', code: 'studio_full' }])
    expect((await upload(studio, [['second.jpg', second]])).status).toBe(413)
    expect(originals(studio)).toHaveLength(1)
  })
})

describe('the same bytes again', () => {
  it('are the same photo, for the same uploader', async () => {
    const studio = await newStudio()
    const bytes = await newPicture()
    const first = await upload(studio, [['a.jpg', bytes]])
    const again = await upload(studio, [['b.jpg', bytes]])
    expect([first.status, again.status]).toEqual([201, 200])
    expect(again.body.items).toEqual(first.body.items)
  })

  it('are one photo when twenty arrive at once', async () => {
    const studio = await newStudio()
    const bytes = await newPicture()
    const answers = await Promise.all(Array.from({ length: 20 }, () => upload(studio, [['a.jpg', bytes]])))
    expect(answers.filter(({ status }) => status === 201)).toHaveLength(1)
    expect(answers.filter(({ status }) => status === 200)).toHaveLength(19)
    expect(new Set(answers.map(({ body }) => body.items[0].id)).size).toBe(1)
    expect(await listed(studio)).toHaveLength(1)
    expect(originals(studio)).toEqual([answers[0]!.body.items[0].id])
  })

  it('come back from the bin', async () => {
    const studio = await newStudio()
    const bytes = await newPicture()
    const [photo] = (await upload(studio, [['a.jpg', bytes]])).body.items
    await studio.agent.delete(`${studio.root}/photos/${photo.id}`)
    const again = await upload(studio, [['a.jpg', bytes]])
    expect(again.body.items[0]).toMatchObject({ id: photo.id, binnedAt: null })
    expect(await listed(studio)).toHaveLength(1)
  })
})

describe('a photo', () => {
  const withPhoto = async () => {
    const studio = await newStudio()
    const [photo] = (await upload(studio, [['a.jpg', await newPicture()]])).body.items
    return { ...studio, photo, path: `${studio.root}/photos/${photo.id}` }
  }

  it('goes into the bin and out again', async () => {
    const studio = await withPhoto()
    expect((await studio.agent.delete(studio.path)).status).toBe(204)
    expect((await studio.agent.delete(studio.path)).status).toBe(204)
    expect(await listed(studio)).toEqual([])
    expect(await listed(studio, '?bin=true')).toHaveLength(1)
    const restored = await studio.agent.post(`${studio.path}/restore`)
    expect(restored.body.binnedAt).toBeNull()
    expect(await listed(studio)).toHaveLength(1)
  })

  it('is renamed at its present revision only', async () => {
    const { agent, path, photo } = await withPhoto()
    expect((await agent.patch(path, { name: 'River', revision: photo.revision })).body).toMatchObject({ name: 'River', revision: photo.revision + 1 })
    const stale = await agent.patch(path, { name: 'Sea', revision: photo.revision })
    expect([stale.status, stale.body.data.code]).toEqual([409, 'stale_revision'])
    expect((await agent.patch(path, { name: 'x'.repeat(10_000), revision: 2 })).status).toBe(422)
  })

  it('is not there for others, in another studio or in the same', async () => {
    const { path, root, studio, photo } = await withPhoto()
    const other = await newStudio()
    for (const method of ['GET', 'DELETE']) expect((await other.agent.call(method, path)).status).toBe(404)
    expect((await other.agent.get(`${other.root}/photos/${photo.id}/file`)).status).toBe(404)
    await withDatabase(sql => sql(`insert into memberships (studio_id, user_id, role) values ($1, $2, 'owner')`, [studio.id, other.ids.user]))
    for (const part of ['', '/file', '/thumbnail', '/proxy']) expect((await other.agent.get(`${path}${part}`)).status).toBe(404)
    expect((await other.agent.get(`${root}/photos`)).body.items).toEqual([])
  })

  it('serves its files with tags, ranges and heads', async () => {
    const { agent, path, photo } = await withPhoto()
    const head = await agent.call('HEAD', `${path}/file`)
    expect(head.headers.get('content-length')).toBe(String(photo.bytes))
    expect(head.headers.get('etag')).toBe(`"${photo.sha256}"`)
    const part = await agent.call('GET', `${path}/file`, { headers: { range: 'bytes=0-1' } })
    expect([part.status, part.headers.get('content-range'), part.headers.get('content-length')]).toEqual([206, `bytes 0-1/${photo.bytes}`, '2'])
    const beyond = await agent.call('GET', `${path}/file`, { headers: { range: `bytes=${photo.bytes}-` } })
    expect([beyond.status, beyond.headers.get('content-range')]).toEqual([416, `bytes */${photo.bytes}`])
    const known = await agent.call('GET', `${path}/thumbnail`, { headers: { 'if-none-match': (await agent.call('HEAD', `${path}/thumbnail`)).headers.get('etag')! } })
    expect(known.status).toBe(304)
    expect((await agent.call('HEAD', `${path}/thumbnail`)).headers.get('cache-control')).toContain('private')
  })

  it('gives its working-space channels in the size that is asked for', async () => {
    const { agent, path } = await withPhoto()
    const whole = await agent.fetch('GET', `${path}/proxy?width=120`)
    expect([whole.headers.get('x-width'), whole.headers.get('x-height')]).toEqual(['120', '80'])
    expect((await whole.arrayBuffer()).byteLength).toBe(120 * 80 * 3 * 2)
    const region = await agent.fetch('GET', `${path}/proxy?width=100&region=0.25,0.25,0.5,0.5&quarterTurns=1`)
    expect([region.headers.get('x-width'), region.headers.get('x-height')]).toEqual(['100', '150'])
    for (const query of ['width=4', 'region=0,0,0,1', 'region=0.5,0,0.6,1', 'region=nonsense', 'colour=yes']) {
      expect((await agent.get(`${path}/proxy?${query}`)).status, query).toBe(422)
    }
  })
})

it('answers nobody without a session', async () => {
  const { root } = await newStudio()
  expect((await new Agent().call('POST', `${root}/photos`, { body: uploadForm([['a.jpg', await newPicture()]]) })).status).toBe(401)
})
