import { and, eq, isNotNull, isNull, or, sql } from 'drizzle-orm'
import { ComputeError } from '#shared/errors'
import type { Photo } from '#shared/schemas/photos'
import { db, type Queryable } from '../db/client'
import { photos } from '../db/schema'
import { hasRole, type StudioAccess } from './access'
import { recordEvent } from './audit'
import { hintBoardOf } from './class-hints'
import { hint } from './hints'
import { keyset, toPage, type Page } from './paging'

export type PhotoRow = typeof photos.$inferSelect

export const showPhoto = ({ studioId: _, ...row }: PhotoRow): Photo =>
  ({ ...row, binnedAt: row.binnedAt?.toISOString() ?? null, createdAt: row.createdAt.toISOString() })

/** A photo is its uploader's alone, */
const ownedBy = (studio: StudioAccess) => and(eq(photos.studioId, studio.id), eq(photos.uploaderId, studio.personId))
const isHandedIn = sql`exists (select 1 from negatives n where n.studio_id = ${photos.studioId} and n.photo_id = ${photos.id} and n.handed_in_at is not null and n.archived_at is null)`
/** but owners and technicians see it while a negative of it is handed in to a class. */
const seenBy = (studio: StudioAccess) => hasRole(studio.role, 'technician') ? or(ownedBy(studio), and(eq(photos.studioId, studio.id), isHandedIn)) : ownedBy(studio)

export async function listPhotos(studio: StudioAccess, page: Page & { bin?: boolean }) {
  const { after, order, take } = keyset(photos.id, page)
  const rows = await db().select().from(photos)
    .where(and(ownedBy(studio), page.bin ? isNotNull(photos.binnedAt) : isNull(photos.binnedAt), after)).orderBy(order).limit(take)
  return toPage(rows, page, showPhoto)
}

/** The photo, in the bin or not; whoever may not see it is told that there is none. */
export async function requirePhoto(studio: StudioAccess, id: string, on: Queryable = db()): Promise<PhotoRow> {
  const [row] = await on.select().from(photos).where(and(seenBy(studio), eq(photos.id, id)))
  if (!row) throw new ComputeError('not_found', 'There is no such photo.')
  return row
}

/** The same for who changes it, or takes the original, which may say where it was taken: to see it is not enough. */
export async function requireOwnPhoto(studio: StudioAccess, id: string, on: Queryable = db()): Promise<PhotoRow> {
  const photo = await requirePhoto(studio, id, on)
  if (photo.uploaderId !== studio.personId) throw new ComputeError('role_too_low', 'This photo was handed in for you to look at. It stays its student’s own.')
  return photo
}

export async function renamePhoto(studio: StudioAccess, id: string, { name, revision }: { name: string, revision: number }): Promise<Photo> {
  return db().transaction(async (tx) => {
    const [row] = await tx.update(photos).set({ name, revision: sql`${photos.revision} + 1` })
      .where(and(ownedBy(studio), eq(photos.id, id), eq(photos.revision, revision))).returning()
    if (row) return tell(tx, row)
    await requireOwnPhoto(studio, id, tx)
    throw new ComputeError('stale_revision', 'This photo has been changed meanwhile. Load it again, then change it.')
  })
}

/** Into the bin; what was made of it stays. A photo that lies there already stays there. */
export async function binPhoto(studio: StudioAccess, id: string): Promise<void> {
  await db().transaction(async (tx) => {
    const photo = await requireOwnPhoto(studio, id, tx)
    if (photo.binnedAt === null) await setBinned(tx, photo, true)
  })
}

export async function restorePhoto(studio: StudioAccess, id: string): Promise<Photo> {
  return db().transaction(async (tx) => {
    const photo = await requireOwnPhoto(studio, id, tx)
    return photo.binnedAt === null ? showPhoto(photo) : setBinned(tx, photo, false)
  })
}

export async function setBinned(on: Queryable, photo: PhotoRow, binned: boolean): Promise<Photo> {
  const [row] = await on.update(photos).set({ binnedAt: binned ? sql`now()` : null, revision: sql`${photos.revision} + 1` })
    .where(and(eq(photos.studioId, photo.studioId), eq(photos.id, photo.id))).returning()
  await recordEvent(on, { studioId: photo.studioId, userId: photo.uploaderId, kind: binned ? 'photo.binned' : 'photo.restored', recordId: photo.id })
  return tell(on, row!)
}

async function tell(on: Queryable, row: PhotoRow): Promise<Photo> {
  await hint(on, { studioId: row.studioId, topic: 'photos', id: row.id, revision: row.revision, onlyFor: row.uploaderId })
  await hintBoardOf(on, row.studioId, row.uploaderId)
  return showPhoto(row)
}
