import { and, eq, sql } from 'drizzle-orm'
import { ComputeError } from '#shared/errors'
import { readSettings } from '../config'
import { db, type Queryable, type Transaction } from '../db/client'
import { photos, readings, studios, uploads } from '../db/schema'
import type { StudioAccess } from './access'
import { storage } from './storage'

/** Keeps count, piece by piece, of what the studio may still store and the disk still takes; throws where either ends. */
export async function roomFor(studio: StudioAccess, expectedBytes: number): Promise<{ take: (bytes: number) => Promise<void> }> {
  const [row] = await db().select({ maxBytes: studios.maxBytes }).from(studios).where(eq(studios.id, studio.id))
  let studioBytes = row!.maxBytes - await bytesUsed(db(), studio.id)
  let unchecked = 0
  const checkDisk = async () => {
    unchecked = 0
    await requireDisk(expectedBytes)
    expectedBytes = 0
  }
  await checkDisk()
  return {
    async take(bytes) {
      studioBytes -= bytes
      unchecked += bytes
      if (studioBytes < 0) throw studioFull()
      if (unchecked > 32e6) await checkDisk()
    },
  }
}

/** Throws where so many bytes would fill the disk. */
export async function requireDisk(bytes: number): Promise<void> {
  if (await storage().freeBytes() - bytes < readSettings().FREE_DISK_MIN_BYTES) throw diskFull()
}

/** Locks the studio's row, so that uploads are counted one after the other, and throws where this one is too many. */
export async function requireRoom(tx: Transaction, studioId: string, bytes: number): Promise<void> {
  const [row] = await tx.select({ maxBytes: studios.maxBytes }).from(studios).where(eq(studios.id, studioId)).for('no key update')
  if (await bytesUsed(tx, studioId) + bytes > row!.maxBytes) throw studioFull()
}

const studioFull = () => new ComputeError('studio_full', 'The studio has no room left for this picture. Ask its owner for more, or erase what is no longer needed.')
const diskFull = () => new ComputeError('disk_full', 'The disk of this installation is nearly full, so this picture was not stored. Tell the studio’s owner.')

/** Originals, scans, and what uploads under way have asked for; films and small pictures are caches. */
async function bytesUsed(on: Queryable, studioId: string): Promise<number> {
  const [stored] = await on.select({ used: sql<string>`coalesce(sum(${photos.bytes}), 0)` }).from(photos).where(eq(photos.studioId, studioId))
  const [scanned] = await on.select({ used: sql<string>`coalesce(sum(${readings.fileBytes}), 0)` }).from(readings).where(eq(readings.studioId, studioId))
  const [arriving] = await on.select({ used: sql<string>`coalesce(sum(${uploads.bytes}), 0)` }).from(uploads).where(and(eq(uploads.studioId, studioId), eq(uploads.state, 'unfinished')))
  return Number(stored!.used) + Number(scanned!.used) + Number(arriving!.used)
}
