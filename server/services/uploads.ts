import { mkdir, rename, rm, stat, writeFile } from 'node:fs/promises'
import { dirname } from 'node:path'
import { and, eq, sql } from 'drizzle-orm'
import { v7 as uuidv7 } from 'uuid'
import type { z } from 'zod'
import { ComputeError } from '#shared/errors'
import { limits } from '#shared/schemas/limits'
import { dayMs, retentionDays } from '#shared/schemas/retention'
import type { Upload, uploadMetadata } from '#shared/schemas/uploads'
import { db, type Transaction } from '../db/client'
import { uploads } from '../db/schema'
import { storageKeys, type TemporaryFile } from '../storage'
import type { StudioAccess } from './access'
import { keyset, toPage, type Page } from './paging'
import { requireDisk, requireRoom } from './room'
import { storage } from './storage'

export const newUploadId = (): string => uuidv7()
export type UploadRow = typeof uploads.$inferSelect

/** Files on their way, piece by piece. An upload is its sender's alone. */
const ownedBy = (studio: StudioAccess) => and(eq(uploads.studioId, studio.id), eq(uploads.personId, studio.personId))

export const partPath = ({ studioId, id }: Pick<UploadRow, 'studioId' | 'id'>): string => storage().ownPath(storageKeys.part(studioId, id))

/** What is on the disk, which a killed process leaves as far as it came; null where there is no part. */
export async function partBytes(row: Pick<UploadRow, 'studioId' | 'id'>): Promise<number | null> {
  return (await stat(partPath(row)).catch(() => null))?.size ?? null
}

export const uploadExpiry = (row: Pick<UploadRow, 'createdAt'>) => new Date(row.createdAt.getTime() + dayMs * retentionDays.unfinishedUpload)

interface NewUpload { id: string, bytes: number, metadata: z.output<typeof uploadMetadata>, origin: UploadRow['origin'] }

/** Sets the studio's room aside for a file and opens its part. */
export async function openUpload(studio: StudioAccess, { id, bytes, metadata, origin }: NewUpload): Promise<UploadRow> {
  requireSize(bytes)
  await requireDisk(bytes)
  const row = await db().transaction(async (tx) => {
    await requireRoom(tx, studio.id, bytes) // its lock on the studio lets uploads be counted one after the other
    await requireFewOpen(tx, studio)
    const [inserted] = await tx.insert(uploads).values({
      studioId: studio.id, id, personId: studio.personId, fileName: metadata.filename || 'Unnamed file', bytes, origin,
      lastModifiedMs: metadata.lastModified ?? null, fingerprint: metadata.fingerprint ?? null,
    }).returning()
    return inserted!
  })
  await mkdir(dirname(partPath(row)), { recursive: true })
  await writeFile(partPath(row), '')
  return row
}

/** Keeps a file that came whole and unasked for, until its person says whether to take it. */
export async function holdShared(studio: StudioAccess, { id, fileName, bytes, file }: { id: string, fileName: string, bytes: number, file: TemporaryFile }): Promise<void> {
  const row = await openUpload(studio, { id, bytes, metadata: { filename: fileName.slice(0, limits.fileNameLength) }, origin: 'share-sheet' })
  await rename(file.path, partPath(row))
}

function requireSize(bytes: number): void {
  if (bytes === 0) throw new ComputeError('not_an_image', 'This file is empty (0 bytes). Choose the picture again.')
  if (bytes > limits.fileMaxBytes) throw new ComputeError('file_too_large', `This file is larger than ${Math.round(limits.fileMaxBytes / 1e6)} MB, the most that is taken.`)
}

async function requireFewOpen(tx: Transaction, studio: StudioAccess): Promise<void> {
  const [{ count } = { count: 0 }] = await tx.select({ count: sql<number>`count(*)::int` }).from(uploads).where(and(ownedBy(studio), eq(uploads.state, 'unfinished')))
  if (count >= limits.openUploads) throw new ComputeError('too_many_requests', `${limits.openUploads} of your uploads are not finished. Finish or remove some of them, then send more.`)
}

/** The upload; whoever may not see it is told that there is none. */
export async function requireUpload(studio: StudioAccess, id: string): Promise<UploadRow> {
  const [row] = await db().select().from(uploads).where(and(ownedBy(studio), eq(uploads.id, id)))
  if (!row) throw new ComputeError('not_found', 'There is no such upload, or its time is up. Send the file again.')
  return row
}

export async function listUploads(studio: StudioAccess, page: Page) {
  const { after, order, take } = keyset(uploads.id, page)
  const rows = await db().select().from(uploads).where(and(ownedBy(studio), eq(uploads.state, 'unfinished'), after)).orderBy(order).limit(take)
  const { items, nextCursor } = toPage(rows, page, row => row)
  return { items: await Promise.all(items.map(showUpload)), nextCursor }
}

export async function showUpload(row: UploadRow): Promise<Upload> {
  return {
    id: row.id, fileName: row.fileName, bytes: row.bytes, receivedBytes: row.state === 'unfinished' ? await partBytes(row) ?? 0 : row.bytes,
    lastModifiedMs: row.lastModifiedMs, fingerprint: row.fingerprint, origin: row.origin, state: row.state, photoId: row.photoId,
    refusal: row.refusalCode === null ? null : { code: row.refusalCode, message: row.refusalMessage ?? '' },
    createdAt: row.createdAt.toISOString(), expiresAt: uploadExpiry(row).toISOString(),
  }
}

/** The part first: while a row is there, what is left of it can be found. */
export async function removeUpload(row: Pick<UploadRow, 'studioId' | 'id'>): Promise<void> {
  await rm(partPath(row), { force: true })
  await db().delete(uploads).where(and(eq(uploads.studioId, row.studioId), eq(uploads.id, row.id)))
}
