import { stat } from 'node:fs/promises'
import { and, eq } from 'drizzle-orm'
import { v7 as uuidv7 } from 'uuid'
import type { z } from 'zod'
import { ComputeError } from '#shared/errors'
import type { Photo, refusedFile } from '#shared/schemas/photos'
import { db, type Queryable, type Transaction } from '../db/client'
import { photos } from '../db/schema'
import type { PictureFacts } from '../image/protocol'
import { storageKeys, type TemporaryFile } from '../storage'
import type { StudioAccess } from './access'
import { recordEvent } from './audit'
import { hintBoardOf } from './class-hints'
import { nameFromFileName } from './file-names'
import { hint } from './hints'
import { imageChild } from './image-child'
import { setBinned, showPhoto, type PhotoRow } from './photos'
import { requireRoom } from './room'
import { storage } from './storage'

export const thumbnailLongerSidePixels = 480

/** A picture file that has arrived whole, under a temporary name, or why it was not taken. */
export interface Arrival {
  id: string
  fileName: string
  bytes: number
  sha256: string
  file?: TemporaryFile
  refusal?: ComputeError
  /** of the studio's room, what was set aside for it before it came */
  reservedBytes?: number
}
type WholeArrival = Arrival & { file: TemporaryFile }
type Refused = z.infer<typeof refusedFile>
export interface Intake { items: Photo[], refused: Refused[], anyNew: boolean }

/** The label of an arriving photo's temporary file: a sweep learns from it what was in the making. */
export const arrivalLabel = (studioId: string, photoId: string) => `photo_${studioId}_${photoId}`
export const newPhotoId = (): string => uuidv7()

/** Takes what is good; what is not is named with its reason. Throws the first reason when nothing could be taken. */
export async function takePhotos(studio: StudioAccess, arrivals: Arrival[]): Promise<Intake> {
  const intake: Intake = { items: [], refused: [], anyNew: false }
  const refusals: ComputeError[] = []
  for (const arrival of arrivals) {
    try {
      if (!arrival.file || arrival.refusal) throw arrival.refusal
      const { photo, isNew } = await takePhoto(studio, { ...arrival, file: arrival.file })
      intake.items.push(photo)
      intake.anyNew ||= isNew
    }
    catch (error) {
      if (!(error instanceof ComputeError)) throw error
      refusals.push(error)
      intake.refused.push({ name: nameFromFileName(arrival.fileName, 'Unnamed file'), code: error.code, message: error.message })
    }
  }
  if (intake.items.length === 0) throw refusals[0] ?? new ComputeError('invalid_input', 'There was no picture in the upload. Send each one as a part named `file`.')
  return intake
}

/** The same uploader's same bytes are the same photo, taken out of the bin if it lay there. */
async function takePhoto(studio: StudioAccess, arrival: WholeArrival): Promise<{ photo: Photo, isNew: boolean }> {
  const known = await sameBytes(db(), studio, arrival.sha256)
  if (known) return { photo: await db().transaction(tx => bringBack(tx, known)), isNew: false }

  const thumbnail = await storage().temporary('thumbnail'), working = await storage().temporary('working')
  try {
    const source = { path: arrival.file.path, working: working.path }
    const facts = await imageChild().call('probe', source)
    // Made now, because it reads the picture to its end: a truncated one is found out before it is stored.
    await imageChild().call('thumbnail', { ...source, target: thumbnail.path, longerSide: thumbnailLongerSidePixels })
    return await db().transaction(tx => store(tx, studio, arrival, facts, { thumbnail, working }))
  }
  catch (error) {
    if (!(error instanceof ComputeError)) arrival.file.abandon()
    throw error
  }
  finally {
    await Promise.all([thumbnail.discard(), working.discard()])
  }
}

/** Files first, row last. The row's lock on the studio keeps its limit, and equal uploads, one after the other. */
async function store(tx: Transaction, studio: StudioAccess, arrival: WholeArrival, facts: PictureFacts, made: { thumbnail: TemporaryFile, working: TemporaryFile }) {
  await requireRoom(tx, studio.id, arrival.bytes - (arrival.reservedBytes ?? 0))
  const known = await sameBytes(tx, studio, arrival.sha256)
  if (known) return { photo: await bringBack(tx, known), isNew: false }

  const [row] = await tx.insert(photos).values({
    studioId: studio.id, id: arrival.id, uploaderId: studio.personId, name: nameFromFileName(arrival.fileName),
    format: facts.format, bytes: arrival.bytes, sha256: arrival.sha256,
    width: facts.width, height: facts.height, orientation: facts.orientation, colourProfile: facts.colourProfile.slice(0, 120), notes: facts.notes,
  }).returning()
  await recordEvent(tx, { studioId: studio.id, userId: studio.personId, kind: 'photo.uploaded', recordId: arrival.id, details: { bytes: arrival.bytes } })
  await hint(tx, { studioId: studio.id, topic: 'photos', id: arrival.id, onlyFor: studio.personId })
  await hintBoardOf(tx, studio.id, studio.personId)
  await made.thumbnail.keep(storageKeys.thumbnail(studio.id, arrival.id))
  // Empty where the picture is quick to decode.
  if ((await stat(made.working.path)).size > 0) await made.working.keep(storageKeys.working(studio.id, arrival.id))
  await arrival.file.keepBeside(storageKeys.original(studio.id, arrival.id))
  return { photo: showPhoto(row!), isNew: true }
}

async function sameBytes(on: Queryable, studio: StudioAccess, sha256: string): Promise<PhotoRow | undefined> {
  const [row] = await on.select().from(photos).where(and(eq(photos.studioId, studio.id), eq(photos.uploaderId, studio.personId), eq(photos.sha256, sha256)))
  return row
}

const bringBack = async (on: Queryable, photo: PhotoRow): Promise<Photo> =>
  photo.binnedAt === null ? showPhoto(photo) : setBinned(on, photo, false)
