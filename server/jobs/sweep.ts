import { and, eq, isNotNull, lte, ne, or, sql } from 'drizzle-orm'
import { retentionDays } from '#shared/schemas/retention'
import { readSettings } from '../config'
import { db } from '../db/client'
import { photos, readings, renders, uploads } from '../db/schema'
import { storage } from '../services/storage'
import { removeUpload } from '../services/uploads'
import { partsFolder, storageKeys } from '../storage'

const olderThan = (seconds: number) => ({ changedAt }: { changedAt: number }) => changedAt < Date.now() - 1000 * seconds

/** A living owner renews its files every second; on a busy machine it may be late. */
const latenessSeconds = 3

/** Removes temporary files whose owner has let their lease run out, with what they left half done. */
export async function sweepTemporaryFiles(leaseSeconds: number): Promise<string[]> {
  const stale = (await storage().list('temporary')).filter(({ key }) => !key.startsWith(`${partsFolder}/`)).filter(olderThan(leaseSeconds + latenessSeconds))
  for (const { key } of stale) {
    const [, studioId, photoId] = /^temporary\/photo_([^_.]+)_([^_.]+)\./.exec(key) ?? []
    if (studioId && photoId) await removeUnrecorded(studioId, photoId)
    await storage().remove(key)
  }
  return stale.map(({ key }) => key)
}

/** An upload that was broken off after its file was put in place, before its row was committed. */
async function removeUnrecorded(studioId: string, photoId: string): Promise<void> {
  const [row] = await db().select({ id: photos.id }).from(photos).where(and(eq(photos.studioId, studioId), eq(photos.id, photoId)))
  if (row) return
  await storage().remove(storageKeys.original(studioId, photoId))
  await storage().remove(storageKeys.thumbnail(studioId, photoId))
}

/** Removes film files that no row names: their worker died between putting them in place and handing them in. */
export async function sweepFilms(leaseSeconds: number): Promise<string[]> {
  const files = (await storage().list('films')).filter(olderThan(2 * leaseSeconds))
  const rows = await db().select({ studioId: renders.studioId, key: renders.renderKey, format: renders.format }).from(renders).where(ne(renders.state, 'failed'))
  const named = new Set(rows.map(row => storageKeys.film(row.studioId, row.key, row.format)))
  const orphans = files.map(({ key }) => key).filter(key => !named.has(key))
  for (const key of orphans) await storage().remove(key)
  return orphans
}

/** An upload's file stands before its row for moments, not for this long. */
const unrecordedScanSeconds = 3600

/** Removes scans that no row names: web died between putting one in place and recording it, or between removing a row and its file. */
export async function sweepScans(): Promise<string[]> {
  const files = (await storage().list('scans')).filter(olderThan(unrecordedScanSeconds))
  if (files.length === 0) return []
  const rows = await db().select({ studioId: readings.studioId, id: readings.id }).from(readings).where(isNotNull(readings.fileSha256))
  const named = new Set(rows.map(row => storageKeys.scan(row.studioId, row.id)))
  const orphans = files.map(({ key }) => key).filter(key => !named.has(key))
  for (const key of orphans) await storage().remove(key)
  return orphans
}

/** A part stands before its row is read for moments, not for this long. */
const unrecordedPartSeconds = 3600

/** Removes uploads whose time is up, finished or not, and parts that no row names. */
export async function sweepUploads(): Promise<{ expired: number, orphans: number }> {
  const since = (days: number) => sql`now() - make_interval(secs => ${86_400 * days})`
  const expired = await db().select({ studioId: uploads.studioId, id: uploads.id }).from(uploads)
    .where(or(and(eq(uploads.state, 'unfinished'), lte(uploads.createdAt, since(retentionDays.unfinishedUpload))), lte(uploads.finishedAt, since(retentionDays.finishedUpload))))
  for (const row of expired) await removeUpload(row)
  const parts = (await storage().list(partsFolder)).filter(olderThan(unrecordedPartSeconds))
  if (parts.length === 0) return { expired: expired.length, orphans: 0 }
  const rows = await db().select({ studioId: uploads.studioId, id: uploads.id }).from(uploads).where(eq(uploads.state, 'unfinished'))
  const named = new Set(rows.map(row => storageKeys.part(row.studioId, row.id)))
  const orphans = parts.filter(({ key }) => !named.has(key))
  for (const { key } of orphans) await storage().remove(key)
  return { expired: expired.length, orphans: orphans.length }
}

/** Puts the films that were not used for longest out of the cache, until it fits its size; pinned ones stay. */
export async function shrinkFilmCache(maxBytes = readSettings().RENDER_CACHE_MAX_BYTES): Promise<number> {
  let removed = 0
  while (await filmBytes() > maxBytes && await removeLeastUsed()) removed++
  return removed
}

async function filmBytes(): Promise<number> {
  const [row] = await db().select({ bytes: sql<string>`coalesce(sum(${renders.bytes}), 0)` }).from(renders).where(eq(renders.state, 'ready'))
  return Number(row!.bytes)
}

/** File first, then row: a row whose file is gone is mended when it is asked for, a file without a row is swept. */
async function removeLeastUsed(): Promise<boolean> {
  return db().transaction(async (tx) => {
    const [row] = await tx.select().from(renders).where(and(eq(renders.state, 'ready'), eq(renders.pinned, false)))
      .orderBy(sql`coalesce(${renders.lastUsedAt}, ${renders.readyAt})`).limit(1).for('update', { skipLocked: true })
    if (!row) return false
    await storage().remove(storageKeys.film(row.studioId, row.renderKey, row.format))
    await tx.delete(renders).where(and(eq(renders.studioId, row.studioId), eq(renders.id, row.id)))
    return true
  })
}

/** The same for thumbnails, proxies and forecasts, which no row names: the least used go first. */
export async function shrinkPictureCache(maxBytes = readSettings().PICTURE_CACHE_MAX_BYTES): Promise<number> {
  return shrinkFolder('cache', maxBytes)
}

/** A file that was asked for lately may be about to be read. */
const copyInUseSeconds = 3600

/** Local copies of what lies in the bucket: the least used go first. */
export const shrinkCopies = (maxBytes = readSettings().S3_COPIES_MAX_BYTES): Promise<number> => shrinkFolder('copies', maxBytes, copyInUseSeconds)

async function shrinkFolder(folder: string, maxBytes: number, inUseSeconds = 0): Promise<number> {
  const files = await storage().list(folder)
  let bytes = files.reduce((sum, file) => sum + file.bytes, 0)
  let removed = 0
  for (const file of files.sort((a, b) => a.changedAt - b.changedAt)) {
    if (bytes <= maxBytes || !olderThan(inUseSeconds)(file)) break
    await storage().remove(file.key)
    bytes -= file.bytes
    removed++
  }
  return removed
}
