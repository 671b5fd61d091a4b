import { createHash } from 'node:crypto'
import { createReadStream } from 'node:fs'
import { link, open, rename, rm } from 'node:fs/promises'
import { pipeline } from 'node:stream/promises'
import { and, eq, sql } from 'drizzle-orm'
import { ComputeError, type ErrorCode } from '#shared/errors'
import type { Photo } from '#shared/schemas/photos'
import { fingerprintOf, fingerprintSlices } from '#shared/uploads/fingerprint'
import { db } from '../db/client'
import { uploads } from '../db/schema'
import type { StudioAccess } from './access'
import { arrivalLabel, newPhotoId, takePhotos } from './photo-intake'
import { requirePhoto, showPhoto } from './photos'
import { storage } from './storage'
import { partBytes, partPath, requireUpload, type UploadRow } from './uploads'

interface Finished { photo: Photo, isNew: boolean }

/** Refusals that are not the file's fault: it stays, and may be finished later. */
const passing: ReadonlySet<ErrorCode> = new Set<ErrorCode>(['studio_full', 'disk_full', 'image_child_failed', 'unavailable', 'too_many_requests', 'internal'])

const underWay = new Map<string, Promise<Finished>>()

/**
 * Makes a photo of an upload that has arrived whole, or says again what became of it. Broken off anywhere, it can be asked
 * again: the part stays until the outcome is recorded, and an uploader's same bytes are one photo.
 */
export function finishUpload(studio: StudioAccess, id: string): Promise<Finished> {
  const key = `${studio.personId}/${studio.id}/${id}`
  let finishing = underWay.get(key)
  if (!finishing) {
    finishing = finish(studio, id).finally(() => underWay.delete(key))
    underWay.set(key, finishing)
  }
  return finishing
}

async function finish(studio: StudioAccess, id: string): Promise<Finished> {
  const row = await requireUpload(studio, id)
  if (row.photoId !== null) return { photo: showPhoto(await requirePhoto(studio, row.photoId)), isNew: false }
  if (row.refusalCode !== null) throw new ComputeError(row.refusalCode as ErrorCode, row.refusalMessage ?? '')
  const received = await partBytes(row) ?? 0
  if (received !== row.bytes) throw new ComputeError('wrong_state', `Only ${received} of ${row.bytes} bytes have arrived. Send the rest first.`)
  try {
    const finished = await takeIn(studio, row)
    await settle(row, { state: 'kept', photoId: finished.photo.id })
    return finished
  }
  catch (error) {
    if (error instanceof ComputeError && !passing.has(error.code)) await settle(row, { state: 'refused', refusalCode: error.code, refusalMessage: error.message })
    throw error
  }
}

async function takeIn(studio: StudioAccess, row: UploadRow): Promise<Finished> {
  const photoId = newPhotoId()
  const file = await storage().temporary(arrivalLabel(studio.id, photoId))
  try {
    await layPartAt(partPath(row), file.path)
    await requireWholeFile(row, file.path)
    const { items: [photo], anyNew } = await takePhotos(studio, [{ id: photoId, fileName: row.fileName, bytes: row.bytes, sha256: await sha256Of(file.path), file, reservedBytes: row.bytes }])
    return { photo: photo!, isNew: anyNew }
  }
  finally {
    await file.discard()
  }
}

/** A second name for the same bytes: the part itself stays. */
async function layPartAt(part: string, path: string): Promise<void> {
  await link(part, `${path}.part`)
  await rename(`${path}.part`, path)
}

/** Pieces of two files, put together by a mistake or left by a power cut, are no file. */
async function requireWholeFile(row: UploadRow, path: string): Promise<void> {
  if (row.fingerprint === null) return
  const file = await open(path)
  try {
    const slices: Uint8Array[] = []
    for (const { start, end } of fingerprintSlices(row.bytes)) slices.push((await file.read(Buffer.alloc(end - start), 0, end - start, start)).buffer)
    if (fingerprintOf(slices) !== row.fingerprint) throw new ComputeError('upload_mixed', 'What has arrived is not the file that was begun: its bytes differ. Send it again from its beginning.')
  }
  finally {
    await file.close()
  }
}

async function sha256Of(path: string): Promise<string> {
  const hash = createHash('sha256')
  await pipeline(createReadStream(path, { highWaterMark: 262_144 }), hash)
  return hash.digest('hex')
}

type Outcome = Pick<UploadRow, 'state'> & Partial<Pick<UploadRow, 'photoId' | 'refusalCode' | 'refusalMessage'>>

/** The outcome first, then the part: the other way round, a kill between would ask for bytes that are no longer needed. */
async function settle(row: UploadRow, outcome: Outcome): Promise<void> {
  await db().update(uploads).set({ ...outcome, finishedAt: sql`now()` }).where(and(eq(uploads.studioId, row.studioId), eq(uploads.id, row.id)))
  await rm(partPath(row), { force: true })
}
