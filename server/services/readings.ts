import { and, eq } from 'drizzle-orm'
import type { z } from 'zod'
import { readMeasurements, type Measurements } from '#shared/calibration/measurements'
import { ComputeError } from '#shared/errors'
import type { Reading, readingBody, readingQuery } from '#shared/schemas/curves'
import { db, type Queryable } from '../db/client'
import { baseExposures, curveReadings, readings, tablets } from '../db/schema'
import { storageKeys } from '../storage'
import type { StudioAccess } from './access'
import { recordEvent } from './audit'
import { findBench, lockBench, type BenchRow } from './benches'
import { bodyHashOf, createOnce, idFor } from './creation'
import { hint } from './hints'
import { keyset, toPage, type Page } from './paging'
import { type ReadingRow, readReadings, showReading } from './reading-view'
import { requireFound } from './revisions'
import { storage } from './storage'

export type MeasuredInput = { body: z.infer<typeof readingBody> } | { text: string, query: z.infer<typeof readingQuery> }

export async function listReadings(studio: StudioAccess, benchId: string, page: Page) {
  requireFound(await findBench(db(), studio.id, benchId))
  const { after, order, take } = keyset(readings.id, page)
  return toPage(await readReadings(db(), and(eq(readings.studioId, studio.id), eq(readings.benchId, benchId), after), order, take), page, item => item)
}

export async function readingOf(studio: StudioAccess, id: string): Promise<Reading> {
  return requireFound((await readReadings(db(), and(eq(readings.studioId, studio.id), eq(readings.id, id))))[0])
}

/** Keeps measured values as a reading of a bench; from then on the bench's combination is fixed. */
export async function createReading(studio: StudioAccess, benchId: string, input: MeasuredInput): Promise<{ created: boolean, item: Reading }> {
  const { id, bodyHash } = identity(benchId, input)
  const read = measure(requireFound(await findBench(db(), studio.id, benchId)), input)
  return await db().transaction(async (tx) => {
    // Locked against a change of the combination, and asked again: it may have been put away since.
    requireMeasurable(await lockBench(tx, studio.id, benchId))
    const { created, row } = await createOnce(bodyHash,
      async () => (await tx.insert(readings).values({
        studioId: studio.id, id, benchId, state: 'ready', quality: 'measured', unit: read.unit, zero: read.zero, paperLightness: read.paperLightness,
        patches: read.patches.map(({ level, lightness, lab }) => ({ level, lightness, lab, deviation: null, used: true })), warnings: read.warnings, bodyHash, createdBy: studio.personId,
      }).onConflictDoNothing().returning())[0],
      () => findReading(tx, studio.id, id))
    if (created) {
      await recordEvent(tx, { studioId: studio.id, userId: studio.personId, kind: 'readings.created', recordId: id, details: { benchId, patches: read.patches.length } })
      await hint(tx, { studioId: studio.id, topic: 'readings', id })
    }
    return { created, item: showReading(row, null) }
  })
}

function identity(benchId: string, input: MeasuredInput): { id: string, bodyHash: string } {
  const sent = 'body' in input ? input.body : input.query
  return { id: idFor(sent), bodyHash: bodyHashOf({ ...sent, text: 'text' in input ? input.text : undefined, benchId }) }
}

function measure(bench: BenchRow, input: MeasuredInput): Measurements {
  requireMeasurable(bench)
  const { zero, paperLightness } = 'body' in input ? input.body : input.query
  return readMeasurements('body' in input ? input.body : input.text, { zero, paperLightness, channel: bench.readingChannel })
}

function requireMeasurable(bench: BenchRow): void {
  requireReadable(bench)
  if (bench.readingChannel === 'colour-path') throw new ComputeError('wrong_state', 'This bench is read along its own colour path, which typed values don’t tell. Choose lightness or a density as its reading channel.')
}

/** A bench that takes readings: one that a person has set up and works on. */
export function requireReadable(bench: BenchRow): void {
  if (bench.starter) throw new ComputeError('combination_fixed', 'This bench is the service’s own and rests on assumptions. Make a copy of it for your paper, film and lamp, and read your wedge there.')
  if (bench.archivedAt) throw new ComputeError('wrong_state', 'This bench has been put away. Make a copy of it to go on.')
}

export async function findReading(on: Queryable, studioId: string, id: string): Promise<ReadingRow | undefined> {
  return (await on.select().from(readings).where(and(eq(readings.studioId, studioId), eq(readings.id, id))))[0]
}

export const hintReading = (on: Queryable, row: { studioId: string, id: string, fence: number }): Promise<void> =>
  hint(on, { studioId: row.studioId, topic: 'readings', id: row.id, revision: row.fence + 1 })

/** Removes a reading that no curve, tablet or base exposure rests on, with its scan. */
export async function deleteReading(studio: StudioAccess, id: string): Promise<void> {
  await db().transaction(async (tx) => {
    const row = requireFound(await findReading(tx, studio.id, id))
    await lockBench(tx, studio.id, row.benchId)
    await requireUnused(tx, row, 'it stays')
    await tx.delete(readings).where(and(eq(readings.studioId, studio.id), eq(readings.id, id)))
    await recordEvent(tx, { studioId: studio.id, userId: studio.personId, kind: 'readings.deleted', recordId: id, details: { benchId: row.benchId } })
    await hintReading(tx, row)
  })
  await storage().remove(storageKeys.scan(studio.id, id))
}

export async function requireUnused(on: Queryable, { studioId, id }: ReadingRow, so: string): Promise<void> {
  const curves = await on.select({ id: curveReadings.curveId }).from(curveReadings).where(and(eq(curveReadings.studioId, studioId), eq(curveReadings.readingId, id))).limit(1)
  const measured = await on.select({ id: tablets.id }).from(tablets).where(and(eq(tablets.studioId, studioId), eq(tablets.readingId, id))).limit(1)
  const exposures = await on.select({ id: baseExposures.id }).from(baseExposures).where(and(eq(baseExposures.studioId, studioId), eq(baseExposures.readingId, id))).limit(1)
  const what = curves.length ? 'curve' : measured.length ? 'step tablet' : exposures.length ? 'base exposure' : null
  if (what) throw new ComputeError('wrong_state', `A ${what} rests on this reading, so ${so}.`)
}
