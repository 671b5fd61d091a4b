import { and, desc, eq, isNull } from 'drizzle-orm'
import type { z } from 'zod'
import { makeScannerProfile, type ProfilePoint, type ScannerProfile as Correction } from '#shared/calibration/scanner-profile'
import { ComputeError } from '#shared/errors'
import type { Process } from '#shared/schemas/benches'
import type { ScannerProfile, scannerProfileBody } from '#shared/schemas/calibration'
import { db, type Queryable } from '../db/client'
import { readings, scannerProfiles, scanners } from '../db/schema'
import type { StudioAccess } from './access'
import { recordEvent } from './audit'
import { bodyHashOf, createOnce, idFor } from './creation'
import { hint } from './hints'
import { keyset, toPage, type Page } from './paging'
import { requireFound } from './revisions'

type Row = typeof scannerProfiles.$inferSelect
type Body = z.infer<typeof scannerProfileBody>
/** An own print teaches a scanner from so many patches on. */
const leastOwnPatches = 8

export async function listScannerProfiles(studio: StudioAccess, scannerId: string, page: Page) {
  await requireScanner(db(), studio.id, scannerId)
  const { after, order, take } = keyset(scannerProfiles.id, page)
  const rows = await db().select().from(scannerProfiles)
    .where(and(eq(scannerProfiles.studioId, studio.id), eq(scannerProfiles.scannerId, scannerId), isNull(scannerProfiles.archivedAt), after)).orderBy(order).limit(take)
  return toPage(rows, page, shown)
}

export async function createScannerProfile(studio: StudioAccess, scannerId: string, body: Body): Promise<{ created: boolean, item: ScannerProfile }> {
  await requireScanner(db(), studio.id, scannerId)
  const points = body.points ?? await pointsOfReading(db(), studio.id, body)
  const { warnings } = makeScannerProfile(points)
  const [id, bodyHash] = [idFor(body), bodyHashOf({ ...body, scannerId })]
  return await db().transaction(async (tx) => {
    const { created, row } = await createOnce(bodyHash, async () => (await tx.insert(scannerProfiles).values({
      studioId: studio.id, id, scannerId, process: body.process, kind: body.kind, points, warnings, notes: body.notes, bodyHash, createdBy: studio.personId,
    }).onConflictDoNothing().returning())[0], () => find(tx, studio.id, id))
    if (created) await tell(tx, studio, row, 'created')
    return { created, item: shown(row) }
  })
}

export async function archiveScannerProfile(studio: StudioAccess, scannerId: string, id: string): Promise<void> {
  await db().transaction(async (tx) => {
    const [row] = await tx.update(scannerProfiles).set({ archivedAt: new Date() })
      .where(and(eq(scannerProfiles.studioId, studio.id), eq(scannerProfiles.scannerId, scannerId), eq(scannerProfiles.id, id), isNull(scannerProfiles.archivedAt))).returning()
    await tell(tx, studio, requireFound(row), 'archived')
  })
}

/** The newest profile of a scanner for a process, ready to correct with; undefined where there is none. */
export async function profileFor(on: Queryable, studioId: string, scannerId: string, process: Process): Promise<{ id: string, profile: Correction } | undefined> {
  const [row] = await on.select().from(scannerProfiles)
    .where(and(eq(scannerProfiles.studioId, studioId), eq(scannerProfiles.scannerId, scannerId), eq(scannerProfiles.process, process), isNull(scannerProfiles.archivedAt)))
    .orderBy(desc(scannerProfiles.id)).limit(1)
  return row && { id: row.id, profile: makeScannerProfile(row.points) }
}

/** The patches of a reading that an instrument measured too. A reading that was corrected already would teach the correction's error. */
async function pointsOfReading(on: Queryable, studioId: string, { readingId, measured = [] }: Body): Promise<ProfilePoint[]> {
  const [reading] = await on.select().from(readings).where(and(eq(readings.studioId, studioId), eq(readings.id, readingId!)))
  if (reading?.state !== 'ready' || reading.quality !== 'scan') throw refusal('readingId', 'There is no finished scan with this id.')
  if (reading.scannerProfileId) throw refusal('readingId', 'This scan was corrected by a profile already. Put that profile away and read the scan again first.')
  const points = measured.flatMap(({ patch, lightness }) => {
    const scanned = reading.patches[patch]?.lightness
    return scanned === undefined || scanned === null ? [] : [{ scanned: Math.min(100, Math.max(0, scanned)), measured: lightness }]
  })
  if (points.length < leastOwnPatches) throw refusal('measured', `Measure at least ${leastOwnPatches} readable patches of the print; these are ${points.length}.`)
  return points
}

const refusal = (path: string, message: string) => new ComputeError('invalid_input', message, [{ path, message }])

async function requireScanner(on: Queryable, studioId: string, id: string): Promise<void> {
  requireFound((await on.select({ id: scanners.id }).from(scanners).where(and(eq(scanners.studioId, studioId), eq(scanners.id, id))))[0])
}

async function find(on: Queryable, studioId: string, id: string): Promise<Row | undefined> {
  return (await on.select().from(scannerProfiles).where(and(eq(scannerProfiles.studioId, studioId), eq(scannerProfiles.id, id))))[0]
}

async function tell(tx: Parameters<typeof recordEvent>[0], studio: StudioAccess, { id, scannerId, process }: Row, verb: string): Promise<void> {
  await recordEvent(tx, { studioId: studio.id, userId: studio.personId, kind: `scanner-profiles.${verb}`, recordId: id, details: { scannerId, process } })
  await hint(tx, { studioId: studio.id, topic: 'scanner-profiles', id })
}

function shown({ id, scannerId, process, kind, points, warnings, notes, archivedAt, createdAt }: Row): ScannerProfile {
  const scanned = points.map(p => p.scanned)
  return { id, scannerId, process, kind, points, from: Math.min(...scanned), to: Math.max(...scanned), warnings, notes, archivedAt: archivedAt?.toISOString() ?? null, createdAt: createdAt.toISOString() }
}
