import { randomFillSync } from 'node:crypto'
import { createReadStream, existsSync, readdirSync, readFileSync, rmSync, statSync, writeFileSync } from 'node:fs'
import { request as httpRequest } from 'node:http'
import { dirname, join } from 'node:path'
import sharp from 'sharp'
import { describe, expect, it, onTestFinished } from 'vitest'
import { newFolder } from '../support/house'
import { filmOf, newNegative } from '../support/negatives'
import { ownInstallation } from '../support/own-installation'
import { newPicture, uploadForm } from '../support/pictures'
import { Agent } from '../support/studio'
import { newWedge } from '../support/wedge-scans'

type Installation = Awaited<ReturnType<typeof ownInstallation>>

const filesBelow = ({ inStorage }: Installation, folder: string) =>
  existsSync(inStorage(folder)) ? readdirSync(inStorage(folder), { recursive: true, withFileTypes: true }).filter(entry => entry.isFile()).length : 0

/** Resident memory of a process, bytes (proc(5), VmRSS in kB). */
const residentBytes = (pid: number) => 1024 * Number(/VmRSS:\s+(\d+) kB/.exec(readFileSync(`/proc/${pid}/status`, 'utf8'))![1])

const headOf = (field: string) => `--edge\r\nContent-Disposition: form-data; name="${field}"; filename="large.png"\r\nContent-Type: image/png\r\n\r\n`
const head = headOf('file')
const foot = '\r\n--edge--\r\n'
const opened = (agent: Agent, path: string, length: number) => httpRequest(new URL(path, agent.address), {
  method: 'POST', headers: { 'content-type': 'multipart/form-data; boundary=edge', 'content-length': length, 'cookie': agent.cookieHeader() },
})

function sendFile(agent: Agent, path: string, file: string, field = 'file'): Promise<number> {
  return new Promise((resolve, reject) => {
    const head = headOf(field)
    const sending = opened(agent, path, head.length + statSync(file).size + foot.length)
    sending.on('response', response => resolve(response.resume().statusCode!)).on('error', reject)
    sending.write(head)
    createReadStream(file).on('end', () => sending.end(foot)).pipe(sending, { end: false })
  })
}

/** Noise can't be compressed: 8200 × 8200 pixels in three channels are a PNG of 202 MB. */
async function largePicture(): Promise<string> {
  const side = 8200
  const path = join(newFolder(), 'large.png')
  await sharp(randomFillSync(Buffer.alloc(3 * side * side)), { raw: { width: side, height: side, channels: 3 } }).png({ compressionLevel: 0 }).toFile(path)
  return path
}

describe('uploads', () => {
  it('of 200 MB raise web’s memory by less than 150 MB', async () => {
    const installation = await ownInstallation()
    const web = await installation.web()
    const { agent, root } = await installation.studioAt(web)
    const picture = await largePicture()
    onTestFinished(() => rmSync(dirname(picture), { recursive: true }))
    expect(statSync(picture).size).toBeGreaterThan(200e6)
    await agent.call('POST', `${root}/photos`, { body: uploadForm([['warm.jpg', await newPicture()]]) })
    const before = residentBytes(web.child.pid!)
    let most = before
    const sampling = setInterval(() => most = Math.max(most, residentBytes(web.child.pid!)), 20)
    const status = await sendFile(agent, `${root}/photos`, picture)
    clearInterval(sampling)
    expect(status).toBe(201)
    expect((most - before) / 1e6, 'MB more than before').toBeLessThan(150)
    expect(filesBelow(installation, 'temporary')).toBe(0)
    await web.stop()
  }, 180_000)

  it('of scans of 200 MB do so too, and their picture is left to the worker', async () => {
    const installation = await ownInstallation()
    const web = await installation.web({ READING_WAIT_SECONDS: '0.1' })
    const studio = await installation.studioAt(web)
    const { wedgeId } = await newWedge(studio)
    const picture = await largePicture()
    onTestFinished(() => rmSync(dirname(picture), { recursive: true }))
    const before = residentBytes(web.child.pid!)
    let most = before
    const sampling = setInterval(() => most = Math.max(most, residentBytes(web.child.pid!)), 20)
    const status = await sendFile(studio.agent, `${studio.root}/wedges/${wedgeId}/readings`, picture, 'scan')
    clearInterval(sampling)
    expect(status).toBe(202)
    expect((most - before) / 1e6, 'MB more than before').toBeLessThan(150)
    expect([filesBelow(installation, 'temporary'), filesBelow(installation, 'scans')]).toEqual([0, 1])
    await web.stop()
  }, 180_000)

  it('that are cut leave nothing, and web goes on', async () => {
    const installation = await ownInstallation()
    const web = await installation.web()
    const { agent, root, ids } = await installation.studioAt(web)
    const sending = opened(agent, `${root}/photos`, 5_000_000)
    sending.on('error', () => {})
    sending.write(head + 'x'.repeat(1_000_000))
    await expect.poll(() => filesBelow(installation, 'temporary'), { timeout: 20_000 }).toBe(1)
    sending.destroy()
    await expect.poll(() => filesBelow(installation, 'temporary'), { timeout: 20_000 }).toBe(0)
    expect((await agent.get(`${root}/photos`)).body.items).toEqual([])
    expect(filesBelow(installation, `originals/${ids.studio}`)).toBe(0)
    await web.stop()
  }, 120_000)

  it('in which web is killed leave nothing that is seen, and what is left is swept', async () => {
    const installation = await ownInstallation()
    const web = await installation.web()
    const { agent, root, ids, email, password } = await installation.studioAt(web)
    const sending = opened(agent, `${root}/photos`, 5_000_000)
    sending.on('error', () => {})
    sending.write(head + 'x'.repeat(1_000_000))
    await expect.poll(() => filesBelow(installation, 'temporary'), { timeout: 20_000 }).toBe(1)
    web.kill()

    const again = await installation.web()
    const back = new Agent(again.address)
    await back.post('/api/auth/login', { email, password })
    expect((await back.get(`${root}/photos`)).body.items).toEqual([])
    const worker = installation.worker()
    await expect.poll(() => filesBelow(installation, 'temporary'), { timeout: 20_000 }).toBe(0)
    expect(filesBelow(installation, `originals/${ids.studio}`)).toBe(0)
    await worker.stop()
    await again.stop()
  }, 120_000)

  it('that broke off between file and row are swept, and a committed one is not', async () => {
    const installation = await ownInstallation()
    const web = await installation.web()
    const { agent, root, ids } = await installation.studioAt(web)
    const { body } = await agent.call('POST', `${root}/photos`, { body: uploadForm([['a.jpg', await newPicture()]]) })
    const [kept, lost] = [body.items[0].id as string, '01890000-0000-7000-8000-000000000000']
    writeFileSync(installation.inStorage('originals', ids.studio, lost), 'original of no record')
    for (const id of [kept, lost]) writeFileSync(installation.inStorage('temporary', `photo_${ids.studio}_${id}.left`), '')
    const worker = installation.worker()
    await expect.poll(() => filesBelow(installation, 'temporary'), { timeout: 20_000 }).toBe(0)
    expect(readdirSync(installation.inStorage('originals', ids.studio))).toEqual([kept])
    await worker.stop()
    await web.stop()
  }, 120_000)

  it('are refused with 507 when the disk is nearly full', async () => {
    const installation = await ownInstallation()
    const web = await installation.web({ FREE_DISK_MIN_BYTES: String(Number.MAX_SAFE_INTEGER) })
    const { agent, root } = await installation.studioAt(web)
    const answer = await agent.call('POST', `${root}/photos`, { body: uploadForm([['a.jpg', await newPicture()]]) })
    expect([answer.status, answer.body.data.code]).toEqual([507, 'disk_full'])
    expect((await agent.get(`${root}/photos`)).status).toBe(200)
    await web.stop()
  })
})

describe('the film cache', () => {
  it('puts out what was not used for longest, and keeps what is pinned', async () => {
    const installation = await ownInstallation()
    const web = await installation.web()
    const studio = await installation.studioAt(web)
    const worker = installation.worker()
    const negative = await newNegative(studio)
    await filmOf(studio, negative.id, 'tiff')
    await installation.rows('update renders set pinned = true')
    await filmOf(studio, negative.id, 'png')
    await worker.stop()
    const small = installation.worker({ RENDER_CACHE_MAX_BYTES: '1' })
    await studio.agent.get(`${studio.root}/negatives/${negative.id}/file?format=pdf`)
    await expect.poll(async () => (await installation.rows('select format from renders')).map(row => row.format), { timeout: 20_000 }).toEqual(['tiff'])
    expect(filesBelow(installation, 'films')).toBe(1)
    await small.stop()
    await web.stop()
  }, 120_000)
})
