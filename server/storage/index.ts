import { createReadStream } from 'node:fs'
import { mkdir, rename, rm, stat } from 'node:fs/promises'
import { dirname, join, resolve, sep } from 'node:path'

/**
 * Files by key below one folder. Keys are made of ids and hashes only, never of what people typed.
 * A file is written under a temporary key and renamed, so that a key names a whole file or none.
 */
export function openStorage(folder: string) {
  const root = resolve(folder)
  const pathOf = (key: string) => {
    const path = join(root, key)
    if (!path.startsWith(root + sep)) throw new Error(`Storage key leaves the storage folder: ${key}`)
    return path
  }
  return {
    root,
    pathOf,
    /** a fresh temporary path on the same file system; `owner` stands in its name so that sweeps know whose it is */
    async temporaryPath(owner: string): Promise<string> {
      const path = pathOf(`temporary/${owner}.${crypto.randomUUID()}`)
      await mkdir(dirname(path), { recursive: true })
      return path
    },
    async keep(temporaryPath: string, key: string): Promise<void> {
      const path = pathOf(key)
      await mkdir(dirname(path), { recursive: true })
      await rename(temporaryPath, path)
    },
    async size(key: string): Promise<number | null> {
      return (await stat(pathOf(key)).catch(() => null))?.size ?? null
    },
    read: (key: string, range?: { start: number, end: number }) => createReadStream(pathOf(key), range),
    remove: (key: string) => rm(pathOf(key), { force: true }),
  }
}
export type Storage = ReturnType<typeof openStorage>

export const storageKeys = {
  original: (studioId: string, photoId: string) => `originals/${studioId}/${photoId}`,
  thumbnail: (studioId: string, photoId: string) => `cache/${studioId}/${photoId}/thumbnail.jpg`,
  proxy: (studioId: string, photoId: string, hash: string) => `cache/${studioId}/${photoId}/${hash}.proxy`,
  film: (studioId: string, renderKey: string, format: string) => `films/${studioId}/${renderKey}.${format}`,
}
