import { createHash } from 'node:crypto'
import { existsSync, mkdirSync, readFileSync, rmSync, writeFileSync } from 'node:fs'
import { dirname, join } from 'node:path'
import sharp from 'sharp'
import { describe, expect, it, onTestFinished } from 'vitest'
import { builtPrograms } from '../../server/cli/paths.mjs'
import { checkStorage } from '../../server/cli/storage-check'
import { storageSettingsSchema } from '../../server/config'
import { openConfiguredStorage } from '../../server/services/storage'
import { storageKeys } from '../../server/storage'
import { startApplication, startWorker } from '../support/application'
import { newBucket } from '../support/bucket'
import { connect, newDatabase, newFolder, runProgram } from '../support/house'
import { newStudio, type Agent } from '../support/studio'

const sha256 = (bytes: Buffer) => createHash('sha256').update(bytes).digest('hex')

async function sendPhoto(agent: Agent, root: string, colour: string) {
  const picture = await sharp({ create: { width: 300, height: 200, channels: 3, background: colour } }).jpeg().toBuffer()
  const form = new FormData()
  form.append('file', new Blob([new Uint8Array(picture)], { type: 'image/jpeg' }), 'quay.jpg')
  return { picture, photo: (await agent.call('POST', `${root}/photos`, { body: form })).body.items[0] }
}

async function installation(env: Record<string, string> = {}) {
  const databaseUrl = await newDatabase('migrated')
  const storage = join(newFolder(), 'files')
  const settings = { programs: builtPrograms, databaseUrl, storage, env }
  const application = await startApplication(settings)
  onTestFinished(() => {
    application.web.kill()
    application.worker.kill()
  })
  return { settings, databaseUrl, storage, address: application.address, studio: await newStudio('Rope Works Studio', application.address) }
}

describe('an installation whose files lie in a bucket', () => {
  it('serves photos and films from there, by links once it is clear who asks, and erases them there', async () => {
    const bucket = await newBucket()
    const { settings, storage, address, studio: { agent, root, studio } } = await installation({ ...bucket, S3_LINK_SECONDS: '60', ERASURE_GRACE_DAYS: '0' })
    const { picture, photo } = await sendPhoto(agent, root, '#787060')
    const inBucket = openConfiguredStorage(storageSettingsSchema.parse({ STORAGE_DIR: newFolder(), ...bucket }))
    expect((await inBucket.stat(storageKeys.original(studio.id, photo.id)))?.bytes).toBe(picture.length)

    // This machine's copy is gone, as on another machine: everything that needs the original fetches it.
    rmSync(join(storage, 'copies'), { recursive: true })
    expect((await agent.fetch('GET', `${root}/photos/${photo.id}/proxy?width=100`)).status).toBe(200)
    const negative = (await agent.post(`${root}/negatives`, { photoId: photo.id, process: 'cyanotype', size: { widthMm: 60, heightMm: 40 } })).body
    const film = `${root}/negatives/${negative.id}/file?format=tiff`
    await expect.poll(async () => (await agent.fetch('HEAD', film)).status, { timeout: 40_000 }).toBe(200)

    const sentOn = await agent.fetch('GET', `${root}/photos/${photo.id}/file`)
    expect([sentOn.status, sentOn.headers.get('cache-control')]).toEqual([302, 'no-store'])
    const link = sentOn.headers.get('location')!
    expect(sha256(Buffer.from(await (await fetch(link)).arrayBuffer()))).toBe(sha256(picture))
    const part = await fetch(link, { headers: { range: 'bytes=10-19' } })
    expect([part.status, Buffer.from(await part.arrayBuffer())]).toEqual([206, picture.subarray(10, 20)])
    expect((await fetch((await agent.fetch('GET', film)).headers.get('location')!)).headers.get('content-disposition')).toContain('.tif')
    const stranger = await newStudio('Ferry Lane', address)
    expect((await stranger.agent.fetch('GET', `${root}/photos/${photo.id}/file`)).status).toBe(404)

    expect((await agent.post(`${root}/erasure`, { name: studio.name })).status).toBe(200)
    // A worker looks for what is due when it starts, then every ten minutes.
    const worker = startWorker(settings)
    onTestFinished(() => worker.kill())
    await expect.poll(async () => (await agent.get(root)).status, { timeout: 40_000 }).toBe(404)
    for (const kind of ['originals', 'films']) expect(await inBucket.list(kind)).toEqual([])
  }, 120_000)
})

describe('the storage check', () => {
  it('names what is missing, moves aside what is damaged or unrecorded, and deletes nothing', async () => {
    const { databaseUrl, storage, studio: { agent, root, studio } } = await installation()
    const pathOf = (key: string) => join(storage, key)
    const [lost, spoilt, sound] = await Promise.all(['#101010', '#808080', '#f0f0f0'].map(colour => sendPhoto(agent, root, colour)))
    const keys = [lost!, spoilt!, sound!].map(({ photo }) => storageKeys.original(studio.id, photo.id))
    rmSync(pathOf(keys[0]!))
    const damaged = Buffer.from(spoilt!.picture)
    damaged[damaged.length >> 1]! ^= 1
    writeFileSync(pathOf(keys[1]!), damaged)
    const stray = storageKeys.scan(studio.id, '0193a0b0-0000-7000-8000-000000000000')
    mkdirSync(dirname(pathOf(stray)), { recursive: true })
    writeFileSync(pathOf(stray), 'nobody knows me')

    const check = (...args: string[]) => runProgram('check-storage', args, { DATABASE_URL: databaseUrl, STORAGE_DIR: storage })
    const bySize = await check('--sizes')
    expect(bySize.status).toBe(1)
    expect(bySize.text).toContain('3 files checked by size: 1 missing, 0 damaged, 0 unrecorded')

    const byHash = await check()
    expect(byHash.text).toContain('3 files checked by SHA-256: 1 missing, 1 damaged, 0 unrecorded')
    expect(byHash.text).toContain(`missing\t${keys[0]}\n`)
    const aside = /now (quarantine\S+)/.exec(byHash.text)![1]!
    expect(readFileSync(pathOf(aside))).toEqual(damaged)
    expect(existsSync(pathOf(keys[1]!))).toBe(false)
    expect(readFileSync(pathOf(keys[2]!))).toEqual(sound!.picture)

    // What arrived a moment ago may get its row yet; two hours later nobody comes for it.
    expect(existsSync(pathOf(stray))).toBe(true)
    const later = await checkStorage(await connect(databaseUrl), openConfiguredStorage(storageSettingsSchema.parse({ STORAGE_DIR: storage })), { now: Date.now() + 7_200_000 })
    expect(later.findings.map(({ key, finding }) => [finding, key]).sort()).toEqual([['missing', keys[0]], ['missing', keys[1]], ['unrecorded', stray]].sort())
    expect(existsSync(pathOf(stray))).toBe(false)
    expect(readFileSync(pathOf(later.findings.find(f => f.key === stray)!.quarantine!), 'utf8')).toBe('nobody knows me')
    expect((await agent.fetch('GET', `${root}/photos/${spoilt!.photo.id}/file`)).status).toBe(503)
  }, 60_000)
})
