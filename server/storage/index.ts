import { createWriteStream } from 'node:fs'
import { link, rename, rm } from 'node:fs/promises'
import type { Readable } from 'node:stream'
import { pipeline } from 'node:stream/promises'
import { ComputeError } from '../../shared/errors'
import { openBucket, type BucketSettings } from './bucket'
import { flush, openDisk, type StoredFile } from './disk'
import { isKept } from './keys'

export type { StoredFile } from './disk'
export { partsFolder, storageKeys, studioFolders } from './keys'

/** A file on its way. Its modification time is its owner's lease: kept fresh while the owner lives, swept when stale. */
export interface TemporaryFile {
  path: string
  /** puts the whole file under its key, replacing what was there; the name is then no longer temporary */
  keep: (key: string) => Promise<void>
  /** puts it under its key as well and stays: a sweep that finds it later knows what was in the making */
  keepBeside: (key: string) => Promise<void>
  discard: () => Promise<void>
  /** leaves it to the sweep: for when it can't be told whether its record was committed */
  abandon: () => void
}

/** Local copies of what lies in the bucket, for work that needs a file. */
const copyOf = (key: string) => `copies/${key}`

/**
 * Files by key: all below one folder, or, where a bucket is named, what is kept for good there and only copies here.
 * A file is written under a temporary name first, so that a key names a whole file or none.
 */
export function openStorage(folder: string, bucketSettings?: BucketSettings) {
  const disk = openDisk(folder)
  const bucket = bucketSettings && openBucket(bucketSettings)
  const inBucket = (key: string) => isKept(key) ? bucket : undefined
  const localKey = (key: string) => inBucket(key) ? copyOf(key) : key
  const fetching = new Map<string, Promise<void>>()

  async function temporary(label: string): Promise<TemporaryFile> {
    const path = await disk.temporary(label)
    return {
      path,
      async keep(key) {
        await flush(path)
        await inBucket(key)?.put(key, path)
        await rename(path, await disk.preparedPath(localKey(key)))
        disk.letGo(path)
      },
      async keepBeside(key) {
        await flush(path)
        await inBucket(key)?.put(key, path)
        await link(path, await disk.preparedPath(localKey(key)))
      },
      async discard() {
        if (disk.letGo(path)) await rm(path, { force: true })
      },
      abandon: () => void disk.letGo(path),
    }
  }

  async function fetchCopy(key: string): Promise<void> {
    const bytes = await bucket!.read(key)
    if (!bytes) throw missing(key)
    const path = await disk.temporary('copy')
    try {
      await pipeline(bytes, createWriteStream(path))
      await rename(path, await disk.preparedPath(copyOf(key)))
    }
    finally {
      if (disk.letGo(path)) await rm(path, { force: true })
    }
  }

  return {
    root: disk.root,
    temporary,
    /** The path of a file for work that reads it, fetched first where only the bucket has it. Throws `file_missing`. */
    async localPath(key: string): Promise<string> {
      const local = localKey(key)
      if (!await disk.stat(local)) {
        if (!inBucket(key)) throw missing(key)
        const work = fetching.get(key) ?? fetchCopy(key).finally(() => fetching.delete(key))
        fetching.set(key, work)
        await work
      }
      if (local !== key) await disk.touch(local)
      return disk.pathOf(local)
    },
    /** Where work may keep a file of its own on this machine, in a cache or while it grows. */
    ownPath(key: string): string {
      if (isKept(key)) throw new Error(`Kept for good, not this machine's own: ${key}`)
      return disk.pathOf(key)
    },
    /** Puts off the day when a cached file goes. */
    touch: (key: string) => disk.touch(localKey(key)),
    stat: (key: string): Promise<StoredFile | null> => (inBucket(key) ?? disk).stat(key),
    /** The bytes of a file, or of a part of it, both ends included. Throws `file_missing`. */
    async read(key: string, range?: { start: number, end: number }): Promise<Readable> {
      if (await disk.stat(localKey(key))) return disk.read(localKey(key), range)
      return await inBucket(key)?.read(key, range) ?? Promise.reject(missing(key))
    },
    /** The kept bytes themselves, not a local copy of them. */
    async readKept(key: string): Promise<Readable> {
      const remote = inBucket(key)
      return remote ? await remote.read(key) ?? Promise.reject(missing(key)) : disk.read(key)
    },
    /** An address that gives the file to whoever holds it, for so long; null where files are sent by ourselves. */
    link: async (key: string, seconds: number, how: { contentType: string, disposition?: string }): Promise<string | null> =>
      await inBucket(key)?.link(key, seconds, how) ?? null,
    async move(from: string, to: string): Promise<void> {
      await (inBucket(from) ?? disk).move(from, to)
      if (inBucket(from)) await disk.remove(copyOf(from))
    },
    async remove(key: string): Promise<void> {
      await inBucket(key)?.remove(key)
      await disk.remove(localKey(key))
    },
    async removeFolder(key: string): Promise<void> {
      await inBucket(key)?.removeFolder(key)
      await disk.removeFolder(localKey(key))
    },
    list: (below: string): Promise<StoredFile[]> => (inBucket(below) ?? disk).list(below),
    freeBytes: disk.freeBytes,
    close: () => bucket?.close(),
  }
}
export type Storage = ReturnType<typeof openStorage>

const missing = (key: string) => new ComputeError('file_missing', `A stored file is missing (${key}). Nothing else is wrong; whoever runs this installation can look for it with the storage check, or bring it back from a backup.`)
