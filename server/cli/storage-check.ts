import type pg from 'pg'
import type { Storage, StoredFile } from '../storage'
import { keptKinds } from '../storage/keys'
import { hashStream } from './backup-manifest'
import { namedFiles, type NamedFile } from './named-files'

export interface Finding { key: string, finding: 'missing' | 'damaged' | 'unrecorded', /** where the file was moved to */ quarantine?: string }

/** A file stands before its row for moments, while it arrives or is being made; not for this long. */
const unrecordedMs = 3600_000

/**
 * Every file that a row names is read and compared with the hash in its row (or only its size, much quicker), and files that no
 * row names are looked for. Damaged and unrecorded ones are moved below `quarantine/`; nothing is deleted.
 */
export async function checkStorage(client: pg.Client, storage: Storage, { onlySizes = false, now = Date.now() } = {}): Promise<{ checked: number, findings: Finding[] }> {
  // First the files, then the rows: what arrives in between has a row.
  const stored = new Map((await Promise.all(keptKinds.map(kind => storage.list(kind)))).flat().map(file => [file.key, file]))
  const named = await namedFiles(client)
  const findings: Finding[] = []
  for (const file of named) {
    const finding = await compare(file, stored.get(file.key), storage, onlySizes)
    if (finding) findings.push({ key: file.key, finding })
    stored.delete(file.key)
  }
  const isOld = ({ changedAt }: StoredFile) => changedAt < now - unrecordedMs
  for (const { key } of [...stored.values()].filter(isOld)) findings.push({ key, finding: 'unrecorded' })
  const day = new Date().toISOString().slice(0, 10)
  for (const found of findings.filter(({ finding }) => finding !== 'missing')) {
    found.quarantine = `quarantine/${day}/${found.key}`
    await storage.move(found.key, found.quarantine)
  }
  return { checked: named.length, findings }
}

async function compare(file: NamedFile, held: StoredFile | undefined, storage: Storage, onlySizes: boolean): Promise<'missing' | 'damaged' | undefined> {
  // A list of before may have missed it: it counts as missing only when it isn't there now either.
  const found = held ?? await storage.stat(file.key)
  if (!found) return file.mayBeMissing ? undefined : 'missing'
  if (file.bytes !== null && found.bytes !== file.bytes) return 'damaged'
  if (onlySizes) return undefined
  return (await hashStream(await storage.readKept(file.key))).sha256 === file.sha256 ? undefined : 'damaged'
}
