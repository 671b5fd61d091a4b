import { createHash } from 'node:crypto'
import { createReadStream, createWriteStream } from 'node:fs'
import { mkdir } from 'node:fs/promises'
import { dirname } from 'node:path'
import { PassThrough, type Readable } from 'node:stream'
import { pipeline } from 'node:stream/promises'
import { z } from 'zod'

const fileFacts = { bytes: z.number().int().min(0), sha256: z.string().regex(/^[0-9a-f]{64}$/) }
/** a storage key: ids and hashes, so that no entry can leave the folder */
const key = z.string().regex(/^(originals|scans|films)(\/[\w-]+){2}(\.[a-z]+)?$/)

/** What stands in a backup's `manifest.json`. */
export const manifestSchema = z.strictObject({
  format: z.literal(1),
  madeAt: z.iso.datetime(),
  /** hashes of the migrations that the dump holds, in their order */
  migrations: z.array(z.string()),
  database: z.strictObject({ file: z.literal('database.dump'), ...fileFacts }),
  files: z.array(z.strictObject({ key, ...fileFacts })),
  /** film files that had left the cache meanwhile; they are made again when asked for */
  notThere: z.array(key),
})
export type Manifest = z.infer<typeof manifestSchema>
export interface FileFacts { bytes: number, sha256: string }

/** Reads a file through, into `target` if given, and tells its size and SHA-256. */
export const hashFile = (path: string, target?: string): Promise<FileFacts> => hashStream(createReadStream(path), target)

/** The same of bytes that come from anywhere. */
export async function hashStream(source: Readable, target?: string): Promise<FileFacts> {
  const hash = createHash('sha256')
  let bytes = 0
  const count = new PassThrough().on('data', (chunk: Buffer) => {
    hash.update(chunk)
    bytes += chunk.length
  })
  if (target) {
    await mkdir(dirname(target), { recursive: true })
    await pipeline(source, count, createWriteStream(target, { flags: 'wx', mode: 0o600 }))
  }
  else {
    await pipeline(source, count.resume())
  }
  return { bytes, sha256: hash.digest('hex') }
}
