import { createReadStream, type Stats } from 'node:fs'
import { link, mkdir, open, readdir, rename, rm, stat, statfs, utimes } from 'node:fs/promises'
import { dirname, join, resolve, sep } from 'node:path'

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

const renewTemporaryMs = 1000

/**
 * Files by key below one folder. Keys are made of ids and hashes only, never of what people typed.
 * A file is written under a temporary name and renamed, so that a key names a whole file or none.
 */
export function openStorage(folder: string) {
  const root = resolve(folder)
  const ours = new Set<string>()
  let renewal: NodeJS.Timeout | undefined

  const pathOf = (key: string) => {
    const path = join(root, key)
    if (!path.startsWith(root + sep)) throw new Error(`Storage key leaves the storage folder: ${key}`)
    return path
  }
  const preparedPath = async (key: string) => {
    const path = pathOf(key)
    await mkdir(dirname(path), { recursive: true })
    return path
  }
  const renewOurs = () => {
    const now = new Date()
    for (const path of ours) utimes(path, now, now).catch(() => {})
  }

  return {
    root,
    pathOf,
    /** an empty file under a fresh name; `label` stands in the name, for the sweep */
    async temporary(label: string): Promise<TemporaryFile> {
      const path = await preparedPath(`temporary/${label}.${crypto.randomUUID()}`)
      await (await open(path, 'wx')).close()
      ours.add(path)
      renewal ??= setInterval(renewOurs, renewTemporaryMs).unref()
      return {
        path,
        async keep(key) {
          await flush(path)
          await rename(path, await preparedPath(key))
          ours.delete(path)
        },
        async keepBeside(key) {
          await flush(path)
          await link(path, await preparedPath(key))
        },
        async discard() {
          if (ours.delete(path)) await rm(path, { force: true })
        },
        abandon() {
          ours.delete(path)
        },
      }
    },
    async stat(key: string): Promise<Stats | null> {
      return stat(pathOf(key)).catch(() => null)
    },
    read: (key: string, range?: { start: number, end: number }) => createReadStream(pathOf(key), range),
    remove: (key: string) => rm(pathOf(key), { force: true }),
    removeFolder: (key: string) => rm(pathOf(key), { force: true, recursive: true }),
    /** keys of all files below a folder, with the time of their last change of any kind */
    async list(below: string): Promise<{ key: string, changedAt: number }[]> {
      const entries = await readdir(pathOf(below), { recursive: true, withFileTypes: true }).catch(() => [])
      const files = await Promise.all(entries.filter(e => e.isFile()).map(async (e) => {
        const path = join(e.parentPath, e.name)
        const facts = await stat(path).catch(() => null)
        return facts && { key: path.slice(root.length + 1), changedAt: Math.max(facts.mtimeMs, facts.ctimeMs) }
      }))
      return files.filter(f => f !== null)
    },
    async freeBytes(): Promise<number> {
      await mkdir(root, { recursive: true })
      const { bavail, bsize } = await statfs(root)
      return bavail * bsize
    },
  }
}
export type Storage = ReturnType<typeof openStorage>

/** What is named by a key must be on the disk, not only in the system's memory. */
async function flush(path: string): Promise<void> {
  const file = await open(path, 'r')
  await file.sync().finally(() => file.close())
}

/** Where uploads grow until they are whole: their rows, and no lease, say how long they stay. */
export const partsFolder = 'temporary/parts'

/** The folders that hold a studio's files. */
export const studioFolders = (studioId: string) => ['originals', 'cache', 'films', 'scans', partsFolder].map(kind => `${kind}/${studioId}`)

export const storageKeys = {
  original: (studioId: string, photoId: string) => `originals/${studioId}/${photoId}`,
  part: (studioId: string, uploadId: string) => `${partsFolder}/${studioId}/${uploadId}`,
  scan: (studioId: string, readingId: string) => `scans/${studioId}/${readingId}`,
  pictureFolder: (studioId: string, photoId: string) => `cache/${studioId}/${photoId}`,
  thumbnail: (studioId: string, photoId: string) => `cache/${studioId}/${photoId}/thumbnail.jpg`,
  /** a proxy's, forecast's, wedge preview's or shown scan's bytes, by the hash of what was asked */
  picture: (studioId: string, recordId: string, hash: string) => `cache/${studioId}/${recordId}/${hash}`,
  /** the decoded codes of a picture that is slow to decode */
  working: (studioId: string, recordId: string) => `cache/${studioId}/${recordId}/working`,
  film: (studioId: string, renderKey: string, format: string) => `films/${studioId}/${renderKey}.${format}`,
}
