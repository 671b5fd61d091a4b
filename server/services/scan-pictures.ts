import { createHash } from 'node:crypto'
import { ComputeError } from '#shared/errors'
import { db } from '../db/client'
import { engineVersion } from '../image/version'
import { storageKeys } from '../storage'
import type { StudioAccess } from './access'
import { imageChild } from './image-child'
import { cachedPicture, type CachedPicture } from './photo-pictures'
import { findReading } from './readings'
import type { ReadingRow } from './reading-view'
import { storage } from './storage'

/** A reading that came from a scan; typed values have no picture. */
export async function requireScan(studio: StudioAccess, id: string): Promise<ReadingRow & { fileBytes: number, fileSha256: string }> {
  const row = await findReading(db(), studio.id, id)
  if (row?.fileBytes == null || row.fileSha256 === null) throw new ComputeError('not_found', 'There is no scan under this address.')
  return { ...row, fileBytes: row.fileBytes, fileSha256: row.fileSha256 }
}

/** The scan as a screen shows it, with the cells of its present reading when asked. */
export function scanPicture(row: ReadingRow, { width, cells }: { width: number, cells: boolean }): Promise<CachedPicture> {
  const drawn = cells ? row.evidence?.cells : undefined
  const asked = createHash('sha256').update(JSON.stringify([engineVersion, row.fileSha256, width, drawn])).digest('hex')
  return cachedPicture(storageKeys.picture(row.studioId, row.id, asked), async target =>
    imageChild().call('scanPicture', { path: await storage().localPath(storageKeys.scan(row.studioId, row.id)), working: storage().ownPath(storageKeys.working(row.studioId, row.id)), target, width, cells: drawn }))
}
