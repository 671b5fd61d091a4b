import type pg from 'pg'
import { storageKeys } from '../storage'

/** A file that a row names. Film files may have left their cache. */
export interface NamedFile { key: string, sha256: string, bytes: number | null, mayBeMissing: boolean }

export async function namedFiles(client: pg.Client): Promise<NamedFile[]> {
  const photos = await client.query<{ studio_id: string, id: string, sha256: string, bytes: string }>('select studio_id, id, sha256, bytes from photos order by studio_id, id')
  const renders = await client.query<{ studio_id: string, render_key: string, format: string, sha256: string, bytes: string | null }>(
    `select studio_id, render_key, format, sha256, bytes from renders where state = 'ready' order by studio_id, render_key`)
  const scans = await client.query<{ studio_id: string, id: string, file_sha256: string, file_bytes: string | null }>('select studio_id, id, file_sha256, file_bytes from readings where file_sha256 is not null order by studio_id, id')
  return [
    ...scans.rows.map(row => ({ key: storageKeys.scan(row.studio_id, row.id), sha256: row.file_sha256, bytes: count(row.file_bytes), mayBeMissing: false })),
    ...photos.rows.map(row => ({ key: storageKeys.original(row.studio_id, row.id), sha256: row.sha256, bytes: count(row.bytes), mayBeMissing: false })),
    ...renders.rows.map(row => ({ key: storageKeys.film(row.studio_id, row.render_key, row.format), sha256: row.sha256, bytes: count(row.bytes), mayBeMissing: true })),
  ]
}

/** PostgreSQL's eight-byte integers come as text. */
const count = (value: string | null): number | null => value === null ? null : Number(value)
