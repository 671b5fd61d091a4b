import { and, eq, ne } from 'drizzle-orm'
import { v7 as uuidv7 } from 'uuid'
import { ComputeError } from '#shared/errors'
import type { Reading } from '#shared/schemas/curves'
import type { ScanFields } from '#shared/schemas/scans'
import { db, type Queryable, type Transaction } from '../db/client'
import { readings, scanners } from '../db/schema'
import { sendJob } from '../jobs/queue'
import { storageKeys } from '../storage'
import type { StudioAccess } from './access'
import { recordEvent } from './audit'
import { findBench, lockBench } from './benches'
import { bodyHashOf } from './creation'
import { nameFromFileName } from './file-names'
import type { Arrival } from './photo-intake'
import { findReading, hintReading, requireReadable } from './readings'
import type { ReadingRow } from './reading-view'
import { requireFound } from './revisions'
import { requireRoom } from './room'
import { doneOrNot } from './scan-waiting'
import { findWedge } from './wedge-parts'

/** Where a scan was handed in: at a wedge, or at a bench whose wedge its code will tell. */
export type ScanPlace = { wedgeId: string } | { benchId: string }
export interface ScanAnswer { status: 200 | 201 | 202, item: Reading }
type WholeArrival = Arrival & { file: NonNullable<Arrival['file']> }

export const newReadingId = (): string => uuidv7()

/** Keeps the scan and has it read; waits a little for the reading. The same bytes for the same wedge are the stored reading. */
export async function takeScan(studio: StudioAccess, place: ScanPlace, arrivals: Arrival[], fields: ScanFields, requestId: string | undefined): Promise<ScanAnswer> {
  const arrival = requireOne(arrivals)
  const { benchId, wedgeId } = await resolvePlace(studio, place)
  if (fields.scannerId) await requireScanner(db(), studio.id, fields.scannerId)
  const { row, isNew } = await db().transaction(tx => store(tx, studio, { benchId, wedgeId }, arrival, fields, requestId)).catch((error) => {
    // Whether the row was committed can't be told: the sweep looks.
    if (!(error instanceof ComputeError)) arrival.file.abandon()
    throw error
  })
  const { isDone, item } = await doneOrNot(row, isNew ? 'refuse' : 'keep')
  return { status: !isDone ? 202 : isNew ? 201 : 200, item }
}

function requireOne(arrivals: Arrival[]): WholeArrival {
  const refusal = arrivals.find(arrival => arrival.refusal)?.refusal
  if (refusal) throw refusal
  const [arrival] = arrivals
  if (!arrival?.file) throw new ComputeError('invalid_input', 'There was no picture in the upload. Send it as a part named `scan`.')
  return { ...arrival, file: arrival.file }
}

async function resolvePlace(studio: StudioAccess, place: ScanPlace): Promise<{ benchId: string, wedgeId?: string }> {
  const wedge = 'wedgeId' in place ? requireFound(await findWedge(db(), studio.id, place.wedgeId)) : undefined
  const benchId = 'benchId' in place ? place.benchId : wedge!.benchId
  requireReadable(requireFound(await findBench(db(), studio.id, benchId)))
  return { benchId, wedgeId: wedge?.id }
}

export async function requireScanner(on: Queryable, studioId: string, id: string): Promise<void> {
  const [row] = await on.select({ id: scanners.id }).from(scanners).where(and(eq(scanners.studioId, studioId), eq(scanners.id, id)))
  if (!row) throw new ComputeError('invalid_input', 'There is no such scanner on the shelf.', [{ path: 'scannerId', message: 'Choose a scanner of this studio.' }])
}

/** File first, row last. The bench's lock keeps its combination, and equal uploads, one after the other. */
async function store(tx: Transaction, studio: StudioAccess, at: { benchId: string, wedgeId?: string }, arrival: WholeArrival, fields: ScanFields, requestId: string | undefined): Promise<{ row: ReadingRow, isNew: boolean }> {
  const { id = arrival.id, scannerId, ...order } = fields
  const bodyHash = bodyHashOf({ ...order, scannerId, ...at, sha256: arrival.sha256 })
  requireReadable(await lockBench(tx, studio.id, at.benchId))
  const taken = fields.id === undefined ? undefined : await findReading(tx, studio.id, id)
  if (taken && taken.bodyHash !== bodyHash) throw new ComputeError('id_taken', 'Another record has this id already. Leave the id out, or make a new one.')
  const known = taken ?? await sameScan(tx, studio.id, at, arrival.sha256)
  if (known) return { row: known, isNew: false }
  await requireRoom(tx, studio.id, arrival.bytes)
  const [row] = await tx.insert(readings).values({
    studioId: studio.id, id, ...at, state: 'waiting', progress: 0, quality: fields.quality ?? 'scan', patches: [], scannerId, order, bodyHash, createdBy: studio.personId,
    fileName: nameFromFileName(arrival.fileName), fileBytes: arrival.bytes, fileSha256: arrival.sha256, requestId: requestId?.slice(0, 64),
  }).returning()
  await recordEvent(tx, { studioId: studio.id, userId: studio.personId, kind: 'readings.scanned', recordId: id, details: { ...at, bytes: arrival.bytes } })
  await enqueueReading(tx, row!)
  await arrival.file.keepBeside(storageKeys.scan(studio.id, id))
  return { row: row!, isNew: true }
}

export async function enqueueReading(tx: Transaction, row: ReadingRow): Promise<void> {
  await sendJob(tx, 'read-scan', { studioId: row.studioId, readingId: row.id })
  await hintReading(tx, row)
}

async function sameScan(on: Queryable, studioId: string, { benchId, wedgeId }: { benchId: string, wedgeId?: string }, sha256: string): Promise<ReadingRow | undefined> {
  const [row] = await on.select().from(readings).where(and(
    eq(readings.studioId, studioId), eq(readings.benchId, benchId), wedgeId ? eq(readings.wedgeId, wedgeId) : undefined, eq(readings.fileSha256, sha256),
    ne(readings.state, 'failed'))).limit(1)
  return row
}
