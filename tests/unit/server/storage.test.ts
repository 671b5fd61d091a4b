import { createHash, randomBytes } from 'node:crypto'
import { existsSync, mkdtempSync, readFileSync, rmSync, statSync, utimesSync, writeFileSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { describe, expect, it, onTestFinished } from 'vitest'
import { storageSettingsSchema } from '../../../server/config'
import { openConfiguredStorage } from '../../../server/services/storage'
import type { Storage } from '../../../server/storage'
import { newBucket } from '../../support/bucket'

const newDisk = () => {
  const folder = mkdtempSync(join(tmpdir(), 'storage-'))
  onTestFinished(() => rmSync(folder, { recursive: true, force: true }))
  return folder
}
const open = (settings: Record<string, string>) => {
  const storage = openConfiguredStorage(storageSettingsSchema.parse({ STORAGE_DIR: newDisk(), ...settings }))
  onTestFinished(() => storage.close())
  return storage
}

const bytesOf = async (stream: AsyncIterable<Buffer>) => {
  const pieces: Buffer[] = []
  for await (const piece of stream) pieces.push(piece)
  return Buffer.concat(pieces)
}
const textOf = async (stream: AsyncIterable<Buffer>) => (await bytesOf(stream)).toString()

async function put(storage: Storage, key: string, bytes: string | Buffer) {
  const file = await storage.temporary('test')
  writeFileSync(file.path, bytes)
  await file.keep(key)
}

describe.each([
  ['on the disk', async () => ({})],
  ['in a bucket', newBucket],
])('storage %s', (_, settings) => {
  it('names a file by its key only once it is whole', async () => {
    const storage = open(await settings())
    const file = await storage.temporary('film_worker')
    writeFileSync(file.path, 'whole')
    expect(await storage.stat('films/s/a.png')).toBeNull()
    await expect(storage.read('films/s/a.png')).rejects.toMatchObject({ code: 'file_missing' })
    await file.keep('films/s/a.png')
    expect(await textOf(await storage.read('films/s/a.png'))).toBe('whole')
    expect(await storage.list('temporary')).toEqual([])
  })

  it('keeps a file beside its temporary name until that is discarded', async () => {
    const storage = open(await settings())
    const file = await storage.temporary('photo_s_p')
    writeFileSync(file.path, 'original')
    await file.keepBeside('originals/s/p')
    expect(await storage.list('temporary')).toHaveLength(1)
    await file.discard()
    expect(await storage.list('temporary')).toEqual([])
    expect(readFileSync(await storage.localPath('originals/s/p'), 'utf8')).toBe('original')
  })

  it('reads a range of bytes, both ends included', async () => {
    const storage = open(await settings())
    await put(storage, 'films/s/range.png', '0123456789')
    await storage.removeFolder('copies')
    expect(await textOf(await storage.read('films/s/range.png', { start: 2, end: 4 }))).toBe('234')
  })

  it('lists, moves and removes what lies below a folder, and nothing beside it', async () => {
    const storage = open(await settings())
    for (const key of ['originals/a/1', 'originals/a/2', 'originals/ab/3', 'cache/a/1']) await put(storage, key, key)
    const keys = async (below: string) => (await storage.list(below)).map(file => file.key).sort()
    expect(await keys('originals')).toEqual(['originals/a/1', 'originals/a/2', 'originals/ab/3'])
    expect((await storage.list('originals')).find(file => file.key === 'originals/ab/3')!.bytes).toBe('originals/ab/3'.length)
    await storage.move('originals/a/2', 'quarantine/originals/a/2')
    expect(await storage.stat('originals/a/2')).toBeNull()
    await storage.removeFolder('originals/a')
    expect(await keys('originals')).toEqual(['originals/ab/3'])
    expect(await keys('cache')).toEqual(['cache/a/1'])
    await expect(storage.localPath('originals/a/2')).rejects.toMatchObject({ code: 'file_missing' })
  })

  it('keeps the modification time of a living owner’s temporary files fresh, and lets an abandoned one age', async () => {
    const storage = open(await settings())
    const [alive, abandoned] = [await storage.temporary('alive'), await storage.temporary('abandoned')]
    abandoned.abandon()
    for (const { path } of [alive, abandoned]) utimesSync(path, 1, 1)
    await expect.poll(() => statSync(alive.path).mtimeMs, { timeout: 4000 }).toBeGreaterThan(Date.now() - 10_000)
    expect(statSync(abandoned.path).mtimeMs).toBe(1000)
    await alive.discard()
  })

  it.each(['../outside', 'a/../../outside', '/etc/passwd/../../..'])('refuses the key %s, which leaves its folder', async (key) => {
    const storage = open(await settings())
    await expect(storage.localPath(key)).rejects.toThrow('leaves the storage folder')
  })
})

describe('a bucket', () => {
  it('gives back a file that this machine has no copy of, in parts as it was sent, and fetches it once', async () => {
    const storage = open(await newBucket())
    const bytes = randomBytes(20e6)
    await put(storage, 'originals/s/large', bytes)
    await storage.removeFolder('copies')
    const paths = await Promise.all([storage.localPath('originals/s/large'), storage.localPath('originals/s/large')])
    expect(new Set(paths).size).toBe(1)
    const hash = (b: Buffer) => createHash('sha256').update(b).digest('hex')
    expect(hash(readFileSync(paths[0]!))).toBe(hash(bytes))
    expect(await storage.list('temporary')).toEqual([])
  })

  it('holds what is kept for good only: caches stay on the machine', async () => {
    const settings = await newBucket()
    const [here, elsewhere] = [open(settings), open(settings)]
    await put(here, 'originals/s/p', 'original')
    await put(here, 'cache/s/p', 'thumbnail')
    expect(await textOf(await elsewhere.read('originals/s/p'))).toBe('original')
    expect(await elsewhere.stat('cache/s/p')).toBeNull()
  })

  it('gives links that open without a session, with the name to save under, for so long and no longer', async () => {
    const storage = open(await newBucket())
    await put(storage, 'films/s/a.tiff', 'film')
    const how = { contentType: 'image/tiff', disposition: 'attachment; filename="Quay.tif"' }
    const link = (await storage.link('films/s/a.tiff', 60, how))!
    const answer = await fetch(link)
    expect([answer.status, await answer.text(), answer.headers.get('content-type'), answer.headers.get('content-disposition')])
      .toEqual([200, 'film', 'image/tiff', 'attachment; filename="Quay.tif"'])
    const short = (await storage.link('films/s/a.tiff', 1, how))!
    await expect.poll(async () => (await fetch(short)).status, { timeout: 5000 }).toBe(403)
    expect(await open({}).link('films/s/a.tiff', 60, how)).toBeNull()
  })

  it('needs its keys: without them the program stops, naming the variable', () => {
    expect(storageSettingsSchema.safeParse({ STORAGE_DIR: '/nowhere', S3_BUCKET: 'ropeworks' }).error!.issues.map(i => i.path.join())).toEqual(['S3_ACCESS_KEY_ID', 'S3_SECRET_ACCESS_KEY'])
    expect(existsSync('/nowhere')).toBe(false)
  })
})
