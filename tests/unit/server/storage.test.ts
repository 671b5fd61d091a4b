import { mkdtempSync, readFileSync, rmSync, utimesSync, writeFileSync, statSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { afterAll, describe, expect, it } from 'vitest'
import { openStorage } from '../../../server/storage'

const folder = mkdtempSync(join(tmpdir(), 'storage-'))
const storage = openStorage(folder)
afterAll(() => rmSync(folder, { recursive: true, force: true }))

const textOf = async (stream: AsyncIterable<Buffer>) => {
  let text = ''
  for await (const piece of stream) text += piece
  return text
}

describe('storage', () => {
  it('names a file by its key only once it is whole', async () => {
    const file = await storage.temporary('film_worker')
    writeFileSync(file.path, 'whole')
    expect(await storage.stat('films/a')).toBeNull()
    await file.keep('films/a')
    expect(readFileSync(storage.pathOf('films/a'), 'utf8')).toBe('whole')
    expect(await storage.list('temporary')).toEqual([])
  })

  it('keeps a file beside its temporary name until that is discarded', async () => {
    const file = await storage.temporary('photo_s_p')
    writeFileSync(file.path, 'original')
    await file.keepBeside('originals/s/p')
    expect(await storage.list('temporary')).toHaveLength(1)
    await file.discard()
    expect(await storage.list('temporary')).toEqual([])
    expect(readFileSync(storage.pathOf('originals/s/p'), 'utf8')).toBe('original')
  })

  it('reads a range of bytes, both ends included', async () => {
    writeFileSync(storage.pathOf('films/range'), '0123456789')
    expect(await textOf(storage.read('films/range', { start: 2, end: 4 }))).toBe('234')
  })

  it('keeps the modification time of a living owner’s temporary files fresh, and lets an abandoned one age', async () => {
    const [alive, abandoned] = [await storage.temporary('alive'), await storage.temporary('abandoned')]
    abandoned.abandon()
    for (const { path } of [alive, abandoned]) utimesSync(path, 1, 1)
    await expect.poll(() => statSync(alive.path).mtimeMs, { timeout: 4000 }).toBeGreaterThan(Date.now() - 10_000)
    expect(statSync(abandoned.path).mtimeMs).toBe(1000)
    await alive.discard()
  })

  it.each(['../outside', 'a/../../outside', '/etc/passwd/../../..'])('refuses the key %s, which leaves its folder', (key) => {
    expect(() => storage.pathOf(key)).toThrow('leaves the storage folder')
  })
})
