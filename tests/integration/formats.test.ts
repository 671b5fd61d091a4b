import { existsSync, readdirSync } from 'node:fs'
import { join } from 'node:path'
import { Readable } from 'node:stream'
import sharp from 'sharp'
import { beforeAll, describe, expect, it } from 'vitest'
import { filmOf } from '../support/negatives'
import { uploadForm } from '../support/pictures'
import { bombs, longTextPng } from '../support/pictures/bombs'
import { mutantOf, soundPictures } from '../support/pictures/mutants'
import { application, newStudio } from '../support/studio'

type Studio = Awaited<ReturnType<typeof newStudio>>
const upload = ({ agent, root }: Studio, name: string, bytes: Uint8Array) => agent.call('POST', `${root}/photos`, { body: uploadForm([[name, bytes]]) })
const originals = ({ ids }: Studio) => {
  const folder = join(application().storage, 'originals', ids.studio)
  return existsSync(folder) ? readdirSync(folder).sort() : []
}
let pictures: Record<string, Buffer>
/** The soak holds answers to two seconds on a service of its own; here others work at the same time. */
const patienceMs = 6000
beforeAll(async () => {
  pictures = await soundPictures()
})

describe('a photo of each format', () => {
  it('is taken, shown, and given back byte for byte as what it is', async () => {
    const studio = await newStudio()
    for (const [name, bytes] of Object.entries(pictures)) {
      const answer = await upload(studio, `photo.${name.endsWith('.png') ? 'jpg' : 'png'}`, bytes)
      expect([name, answer.status]).toEqual([name, 201])
      const [photo] = answer.body.items
      const path = `${studio.root}/photos/${photo.id}`
      // Orientation 6 by Exif, in AVIF by a property of the file; heif-enc leaves its picture as it is.
      const isTurned = photo.format !== 'heic'
      expect([name, photo.width, photo.height]).toEqual([name, ...isTurned ? [64, 96] : [96, 64]])
      const thumbnail = await sharp(Buffer.from(await (await studio.agent.fetch('GET', `${path}/thumbnail`)).arrayBuffer())).metadata()
      expect([name, thumbnail.width, thumbnail.height]).toEqual([name, photo.width, photo.height])
      const file = await studio.agent.fetch('GET', `${path}/file`)
      expect([name, file.headers.get('content-type')]).toEqual([name, `image/${photo.format}`])
      expect(Buffer.from(await file.arrayBuffer()).equals(bytes), name).toBe(true)
      const region = await studio.agent.fetch('GET', `${path}/proxy?width=40&region=0.25,0.25,0.5,0.5`)
      expect([name, region.status, (await region.arrayBuffer()).byteLength]).toEqual([name, 200, 6 * 40 * Number(region.headers.get('x-height'))])
    }
    const { body } = await studio.agent.get(`${studio.root}/photos?limit=100`)
    expect(new Set(body.items.map((photo: { format: string }) => photo.format))).toEqual(new Set(['jpeg', 'png', 'tiff', 'webp', 'avif', 'heic']))
  })

  it('that is slow to decode becomes a forecast and a film, and its codes are kept', async () => {
    const studio = await newStudio()
    const photo = (await upload(studio, 'IMG_0001.HEIC', pictures['plain.heic']!)).body.items[0]
    expect(photo).toMatchObject({ name: 'IMG_0001', format: 'heic', notes: [] })
    expect(existsSync(join(application().storage, 'cache', studio.ids.studio, photo.id, 'working'))).toBe(true)
    const negative = (await studio.agent.post(`${studio.root}/negatives`, { photoId: photo.id, process: 'cyanotype', size: { widthMm: 30, heightMm: 20 } })).body
    const forecast = await studio.agent.fetch('GET', `${studio.root}/negatives/${negative.id}/forecast?width=200`)
    expect([forecast.status, (await sharp(Buffer.from(await forecast.arrayBuffer())).metadata()).width]).toEqual([200, 200])
    const film = await filmOf(studio, negative.id)
    expect([film.status, film.headers.get('content-type')]).toEqual([200, 'image/tiff'])
  })
})

it('mutants of pictures, ten of the ten thousand of the soak, are answered in words and leave nothing half done', async () => {
  const studio = await newStudio()
  const taken = new Set<string>()
  for (let seed = 1; seed <= 10; seed++) {
    const { name, bytes } = mutantOf(pictures, seed)
    const started = performance.now()
    const { status, body, text } = await upload(studio, name, bytes)
    expect([200, 201, 413, 415, 422], `seed ${seed}, ${name}: ${text.slice(0, 200)}`).toContain(status)
    expect(performance.now() - started, `seed ${seed}, ${name}`).toBeLessThan(patienceMs)
    if (status < 300) taken.add(body.items[0].id)
    else expect(body.message.length).toBeGreaterThan(20)
  }
  expect(originals(studio)).toEqual([...taken].sort())
  expect((await studio.agent.get(`${studio.root}/photos?limit=100`)).body.items.map((photo: { id: string }) => photo.id).sort()).toEqual([...taken].sort())
})

describe('bombs', () => {
  it('are refused by what they would become, before it comes to that', async () => {
    // Made first: while they are, the service may give up a connection that nobody uses.
    const all = bombs(pictures['plain.heic']!)
    const studio = await newStudio()
    for (const { name, bytes, code } of all) {
      const started = performance.now()
      const { body } = await upload(studio, name, bytes)
      expect([name, body.data?.code]).toEqual([name, code])
      if (code === 'picture_too_large') expect(body.message).toMatch(/may have \d+ million/)
      expect(performance.now() - started, name).toBeLessThan(patienceMs)
    }
  })

  it('a text of 70 MB before the picture is stepped over and refused', async () => {
    const studio = await newStudio()
    const boundary = 'boundary'
    const body = Readable.from((function* () {
      yield Buffer.from(`--${boundary}\r\ncontent-disposition: form-data; name="file"; filename="long.png"\r\n\r\n`)
      yield* longTextPng(70_000_000)
      yield Buffer.from(`\r\n--${boundary}--\r\n`)
    })())
    const response = await fetch(new URL(`${studio.root}/photos`, application().address), {
      method: 'POST', body: Readable.toWeb(body) as BodyInit, duplex: 'half', headers: { 'content-type': `multipart/form-data; boundary=${boundary}`, 'cookie': studio.agent.cookieHeader() },
    } as RequestInit)
    expect(await response.json()).toMatchObject({ statusCode: 422, data: { code: 'image_unreadable' }, message: expect.stringContaining('too much beside the picture') })
    expect(originals(studio)).toEqual([])
  })
})
