import { createHash, randomFillSync, randomInt } from 'node:crypto'
import { existsSync, readdirSync, statSync } from 'node:fs'
import sharp from 'sharp'
import { describe, expect, it } from 'vitest'
import { withDatabase } from '../support/database'
import { newPersonIn } from '../support/people'
import { ownInstallation } from '../support/own-installation'
import { newPicture, uploadForm } from '../support/pictures'
import { beginUpload, callTus, offsetOf, sendFrom } from '../support/resumable'
import { Agent, application, newStudio } from '../support/studio'

const sha256 = (bytes: Uint8Array) => createHash('sha256').update(bytes).digest('hex')
const idOf = (path: string) => path.split('/').at(-1)!
const filesBelow = (folder: string) => !existsSync(folder) ? [] : readdirSync(folder, { recursive: true, withFileTypes: true }).filter(entry => entry.isFile()).map(entry => `${entry.parentPath}/${entry.name}`.slice(folder.length + 1))

/** Noise can't be compressed: 2000 × 2000 pixels in three channels are a PNG of 12 MB. */
const noisePicture = (side: number): Promise<Buffer> =>
  sharp(randomFillSync(Buffer.alloc(3 * side * side)), { raw: { width: side, height: side, channels: 3 } }).png({ compressionLevel: 0 }).toBuffer()

describe('an upload that is cut', () => {
  it('goes on where the bytes on the disk end, over a kill of web, and over another between its last byte and its photo: one photo of equal bytes', async () => {
    const installation = await ownInstallation()
    const first = await installation.web()
    const { agent, root, ids, email, password } = await installation.studioAt(first)
    const signedInAgain = async (address: string) => {
      const back = new Agent(address)
      await back.post('/api/auth/login', { email, password })
      return back
    }
    const picture = await noisePicture(2000)
    expect(picture.length).toBeGreaterThan(12e6)
    const path = await beginUpload(agent, root, picture)
    await sendFrom(agent, path, 0, picture, picture.length >> 1).catch(() => {})
    first.kill()
    const part = installation.inStorage('temporary', 'parts', ids.studio, idOf(path))
    const onDisk = statSync(part).size
    expect(onDisk).toBeGreaterThan(0)
    expect(onDisk).toBeLessThanOrEqual(picture.length >> 1)

    const again = await installation.web()
    const back = await signedInAgain(again.address)
    expect((await back.get(`${root}/photos`)).body.items).toEqual([])
    const { items } = (await back.get(`${root}/uploads`)).body
    expect(items).toHaveLength(1)
    expect(items[0]).toMatchObject({ id: idOf(path), fileName: 'weir.png', bytes: picture.length, receivedBytes: onDisk, state: 'unfinished', origin: 'screen', lastModifiedMs: 1760000000000 })
    expect(await offsetOf(back, path)).toBe(onDisk)
    const sending = sendFrom(back, path, onDisk, picture).catch(() => undefined)
    await expect.poll(() => statSync(part).size, { timeout: 20_000, interval: 1 }).toBe(picture.length)
    again.kill()
    expect(await sending, 'the answer that never came').toBeUndefined()

    const last = await installation.web()
    const once = await signedInAgain(last.address)
    expect((await once.get(`${root}/photos`)).body.items).toEqual([])
    expect(await offsetOf(once, path)).toBe(picture.length)
    const finished = await Promise.all([once.post(`${path}/finish`), once.post(`${path}/finish`)])
    expect(new Set(finished.map(answer => answer.body.id)).size).toBe(1)
    expect((await once.post(`${path}/finish`)).status).toBe(200)
    const { items: [photo, ...more] } = (await once.get(`${root}/photos`)).body
    expect(more).toEqual([])
    expect(photo).toMatchObject({ id: finished[0]!.body.id, name: 'weir', bytes: picture.length, sha256: sha256(picture) })
    const file = await once.fetch('GET', `${root}/photos/${photo.id}/file`)
    expect(sha256(new Uint8Array(await file.arrayBuffer()))).toBe(sha256(picture))
    expect((await once.get(`${root}/uploads`)).body.items).toEqual([])
    const worker = installation.worker()
    await expect.poll(() => filesBelow(installation.inStorage('temporary')), { timeout: 20_000 }).toEqual([])
    expect(filesBelow(installation.inStorage('originals'))).toEqual([`${ids.studio}/${photo.id}`])
    await worker.stop()
    await last.stop()
  }, 120_000)

  it('at ten random places is seen as a photo by no route and lies nowhere but among the temporary files, until it is whole', async () => {
    const { agent, root, ids } = await newStudio()
    const inStudio = () => filesBelow(application().storage).filter(file => file.includes(ids.studio))
    const picture = await noisePicture(1000)
    const path = await beginUpload(agent, root, picture)
    for (let cut = 1; cut <= 10; cut++) {
      const offset = await offsetOf(agent, path)
      const rest = picture.length - offset
      await expect(sendFrom(agent, path, offset, picture, randomInt(1, Math.max(2, Math.floor(rest / 3))))).rejects.toThrow()
      expect((await agent.get(`${root}/photos`)).body.items).toEqual([])
      expect((await agent.get(`${root}/photos/${idOf(path)}/file`)).status).toBe(404)
      expect((await agent.post(`${path}/finish`)).body.data.code).toBe('wrong_state')
      expect(inStudio()).toEqual([`temporary/parts/${ids.studio}/${idOf(path)}`])
    }
    expect((await sendFrom(agent, path, await offsetOf(agent, path), picture)).status).toBe(204)
    const { items } = (await agent.get(`${root}/photos`)).body
    expect(items.map((photo: { sha256: string }) => photo.sha256)).toEqual([sha256(picture)])
    expect(inStudio().sort()).toEqual([`cache/${ids.studio}/${items[0].id}/thumbnail.jpg`, `originals/${ids.studio}/${items[0].id}`])
  }, 60_000)

})

describe('uploads', () => {
  it('of the same file, fifty at once, become one photo, and none is refused', async () => {
    const { agent, root } = await newStudio()
    const picture = await newPicture({ width: 900, height: 600 })
    const answers = await Promise.all(Array.from({ length: 50 }, async () => {
      const path = await beginUpload(agent, root, picture)
      const sent = await sendFrom(agent, path, 0, picture)
      return { sent: sent.status, photo: (await agent.post(`${path}/finish`)).body.id as string }
    }))
    expect(answers.filter(({ sent }) => sent !== 204)).toEqual([])
    expect(new Set(answers.map(({ photo }) => photo)).size).toBe(1)
    expect((await agent.get(`${root}/photos`)).body.items).toHaveLength(1)
  }, 60_000)

  it('belong to their sender: another member of the studio finds none of them', async () => {
    const { agent, root, ids } = await newStudio()
    const member = await newPersonIn(ids.studio, 'member')
    const picture = await newPicture()
    const path = await beginUpload(member.agent, root, picture)
    expect((await agent.get(`${root}/uploads`)).body.items).toEqual([])
    for (const answer of [await callTus(agent, path, { method: 'HEAD' }), await sendFrom(agent, path, 0, picture), await callTus(agent, path, { method: 'DELETE' }), await agent.post(`${path}/finish`), await agent.get(path)]) expect(answer.status).toBe(404)
    expect(await offsetOf(member.agent, path)).toBe(0)
  })

  it('that are no picture are refused with their last byte, and again when asked; nothing of them stays', async () => {
    const { agent, root } = await newStudio()
    const notes = Buffer.from('shopping: citric acid, blotting paper')
    const path = await beginUpload(agent, root, notes, 'notes.jpg')
    const sent = await sendFrom(agent, path, 0, notes)
    expect([sent.status, JSON.parse(sent.text).data.code]).toEqual([415, 'not_an_image'])
    const again = await agent.post(`${path}/finish`)
    expect([again.status, again.body.data.code]).toEqual([415, 'not_an_image'])
    expect((await agent.get(path)).body).toMatchObject({ state: 'refused', refusal: { code: 'not_an_image' } })
    expect((await agent.get(`${root}/uploads`)).body.items).toEqual([])
  })

  it('whose second half is another file’s are refused: that is no file', async () => {
    const { agent, root } = await newStudio()
    const [one, other] = [await noisePicture(300), await noisePicture(300)]
    const mixed = Buffer.concat([one.subarray(0, one.length >> 1), other.subarray(one.length >> 1)])
    const path = await beginUpload(agent, root, one)
    const sent = await sendFrom(agent, path, 0, mixed)
    expect([sent.status, JSON.parse(sent.text).data.code]).toEqual([422, 'upload_mixed'])
  })

  it('set the studio’s room aside when they begin, and give it back when they are given up', async () => {
    const { agent, root, ids } = await newStudio()
    const picture = await noisePicture(300)
    await withDatabase(sql => sql('update studios set max_bytes = $2 where id = $1', [ids.studio, Math.round(1.5 * picture.length)]))
    const path = await beginUpload(agent, root, picture)
    await expect(beginUpload(agent, root, picture)).rejects.toThrow(/studio_full/)
    const form = uploadForm([['a.png', await noisePicture(299)]])
    expect((await agent.call('POST', `${root}/photos`, { body: form })).body.data.code).toBe('studio_full')
    expect((await callTus(agent, path, { method: 'DELETE' })).status).toBe(204)
    const second = await beginUpload(agent, root, picture)
    expect((await sendFrom(agent, second, 0, picture)).status).toBe(204)
    expect((await agent.post(`${second}/finish`)).body.bytes).toBe(picture.length)
  })

  it('answer a sender who is refused, whatever is still on its way', async () => {
    const { agent, root } = await newStudio()
    const large = Buffer.alloc(30_000_000, 1)
    const nobody = new Agent(agent.address)
    const path = await beginUpload(agent, root, large)
    const refused = [
      await sendFrom(nobody, path, 0, large), await sendFrom(agent, path.replace(/.$/, last => last === '0' ? '1' : '0'), 0, large),
      await callTus(agent, path, { method: 'PATCH', headers: { 'upload-offset': 9 }, bytes: large }),
      await callTus(agent, path, { method: 'PATCH', headers: { 'upload-offset': 0 }, bytes: Buffer.concat([large, large]) }),
    ]
    expect(refused.map(({ status, text }) => `${status} ${JSON.parse(text).data.code}`)).toEqual(['401 not_signed_in', '404 not_found', '409 wrong_offset', '413 file_too_large'])
    const form = uploadForm([['large.jpg', large]])
    expect((await nobody.call('POST', `${root}/photos`, { body: form })).status).toBe(401)
    expect((await agent.call('POST', `${root}/photos`, { body: form })).status).toBe(415)
  }, 60_000)

  it('whose time is up are swept with their parts, as are photos in the bin', async () => {
    const installation = await ownInstallation()
    const web = await installation.web()
    const { agent, root, ids } = await installation.studioAt(web)
    const picture = await newPicture()
    const old = await beginUpload(agent, root, picture), fresh = await beginUpload(agent, root, picture)
    const finished = await beginUpload(agent, root, picture)
    await sendFrom(agent, finished, 0, picture)
    const kept = (await agent.post(`${finished}/finish`)).body.id
    const form = uploadForm([['binned.jpg', await newPicture()], ['just-binned.jpg', await newPicture()]])
    const [binned, justBinned] = (await agent.call('POST', `${root}/photos`, { body: form })).body.items.map((photo: { id: string }) => photo.id) as [string, string]
    for (const id of [binned, justBinned]) await agent.delete(`${root}/photos/${id}`)
    await agent.post(`${root}/negatives`, { photoId: binned, process: 'cyanotype', size: { widthMm: 60, heightMm: 40 } })
    await installation.rows('update uploads set created_at = now() - interval \'7 days\' where id = $1', [idOf(old)])
    await installation.rows('update uploads set finished_at = now() - interval \'1 day\' where id = $1', [idOf(finished)])
    await installation.rows('update photos set binned_at = now() - interval \'30 days\' where id = $1', [binned])
    const worker = installation.worker()
    await expect.poll(async () => (await installation.rows('select id from uploads')).map(row => row.id), { timeout: 20_000 }).toEqual([idOf(fresh)])
    await expect.poll(async () => (await installation.rows('select id from photos order by id')).map(row => row.id), { timeout: 20_000 }).toEqual([kept, justBinned].sort())
    expect(filesBelow(installation.inStorage('temporary', 'parts'))).toEqual([`${ids.studio}/${idOf(fresh)}`])
    expect(filesBelow(installation.inStorage('originals', ids.studio)).sort()).toEqual([kept, justBinned].sort())
    expect((await callTus(agent, old, { method: 'HEAD' })).status).toBe(404)
    expect(await installation.rows('select id from negatives where photo_id = $1', [binned])).toEqual([])
    await worker.stop()
    await web.stop()
  }, 120_000)
})

describe('the share sheet', () => {
  const share = (agent: Agent, files: [string, Uint8Array][], site = 'none') => agent.call('POST', '/share', { body: uploadForm(files), headers: { 'sec-fetch-site': site, 'origin': 'null' } })

  it('hands pictures over that wait for their person’s word, and become photos with it', async () => {
    const { agent, root, studio } = await newStudio()
    const picture = await newPicture()
    const answer = await share(agent, [['from the gallery.jpg', picture], ['empty.jpg', Buffer.alloc(0)]])
    expect([answer.status, answer.headers.get('location')]).toEqual([303, `/s/${studio.slug}/photos`])
    const { items } = (await agent.get(`${root}/uploads`)).body
    expect(items).toEqual([expect.objectContaining({ fileName: 'from the gallery.jpg', origin: 'share-sheet', bytes: picture.length, receivedBytes: picture.length })])
    expect((await agent.get(`${root}/photos`)).body.items).toEqual([])
    expect((await agent.post(`${root}/uploads/${items[0].id}/finish`)).body).toMatchObject({ name: 'from the gallery', sha256: sha256(picture) })
  })

  it('is the only one who may: no page of another site puts anything into somebody’s studio', async () => {
    const { agent, root } = await newStudio()
    for (const site of ['cross-site', 'same-site']) expect((await share(agent, [['a.jpg', await newPicture()]], site)).body.data.code).toBe('foreign_origin')
    expect((await agent.call('POST', '/share', { body: uploadForm([['a.jpg', await newPicture()]]) })).status, 'no word of where it comes from').toBe(403)
    expect((await agent.get(`${root}/uploads`)).body.items).toEqual([])
  })

  it('is told to sign in first', async () => {
    const { headers, status } = await share(new Agent(), [['a.jpg', await newPicture()]])
    expect([status, headers.get('location')]).toEqual([303, '/shared?why=sign-in'])
  })
})
