import { createReadStream } from 'node:fs'
import { mkdir, open, readdir, rename, rm, stat, statfs, utimes } from 'node:fs/promises'
import { dirname, join, resolve, sep } from 'node:path'
import type { Readable } from 'node:stream'

export interface StoredFile { key: string, bytes: number, /** of any kind of change, milliseconds since 1970 */ changedAt: number }

const renewTemporaryMs = 1000

/** Files by key below one folder. */
export function openDisk(folder: string) {
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
  const facts = async (key: string): Promise<StoredFile | null> => {
    const found = await stat(pathOf(key)).catch(() => null)
    return found?.isFile() ? { key, bytes: found.size, changedAt: Math.max(found.mtimeMs, found.ctimeMs) } : null
  }
  const renewOurs = () => {
    for (const path of ours) freshen(path)
  }

  return {
    root,
    pathOf,
    preparedPath,
    stat: facts,
    /** an empty file under a fresh name, its time kept fresh until it is let go */
    async temporary(label: string): Promise<string> {
      const path = await preparedPath(`temporary/${label}.${crypto.randomUUID()}`)
      await (await open(path, 'wx')).close()
      ours.add(path)
      renewal ??= setInterval(renewOurs, renewTemporaryMs).unref()
      return path
    },
    /** true if it was one of ours until now */
    letGo: (path: string): boolean => ours.delete(path),
    touch: (key: string) => freshen(pathOf(key)),
    read: (key: string, range?: { start: number, end: number }): Readable => createReadStream(pathOf(key), range),
    async move(from: string, to: string): Promise<void> {
      await rename(pathOf(from), await preparedPath(to))
    },
    remove: (key: string) => rm(pathOf(key), { force: true }),
    removeFolder: (key: string) => rm(pathOf(key), { force: true, recursive: true }),
    async list(below: string): Promise<StoredFile[]> {
      const entries = await readdir(pathOf(below), { recursive: true, withFileTypes: true }).catch(() => [])
      const files = await Promise.all(entries.filter(e => e.isFile()).map(e => facts(join(e.parentPath, e.name).slice(root.length + 1))))
      return files.filter(file => file !== null)
    },
    async freeBytes(): Promise<number> {
      await mkdir(root, { recursive: true })
      const { bavail, bsize } = await statfs(root)
      return bavail * bsize
    },
  }
}
export type Disk = ReturnType<typeof openDisk>

function freshen(path: string): Promise<void> {
  const now = new Date()
  return utimes(path, now, now).catch(() => {})
}

/** What is named by a key must be on the disk, not only in the system's memory. */
export async function flush(path: string): Promise<void> {
  const file = await open(path, 'r')
  await file.sync().finally(() => file.close())
}
