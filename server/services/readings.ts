import { and, eq } from 'drizzle-orm'
import type { z } from 'zod'
import { readMeasurements, type Measurements } from '#shared/calibration/measurements'
import { ComputeError } from '#shared/errors'
import type { Reading, readingBody, readingQuery } from '#shared/schemas/curves'
import { db, type Queryable } from '../db/client'
import { readings } from '../db/schema'
import type { StudioAccess } from './access'
import { recordEvent } from './audit'
import { findBench, lockBench, type BenchRow } from './benches'
import { bodyHashOf, createOnce, idFor } from './creation'
import { hint } from './hints'
import { keyset, toPage, type Page } from './paging'
import { requireFound } from './revisions'

export type ReadingRow = typeof readings.$inferSelect
export type MeasuredInput = { body: z.infer<typeof readingBody> } | { text: string, query: z.infer<typeof readingQuery> }

export async function listReadings(studio: StudioAccess, benchId: string, page: Page) {
  requireFound(await findBench(db(), studio.id, benchId))
  const { after, order, take } = keyset(readings.id, page)
  const rows = await db().select().from(readings).where(and(eq(readings.studioId, studio.id), eq(readings.benchId, benchId), after)).orderBy(order).limit(take)
  return toPage(rows, page, row => shown(row))
}

export async function readingOf(studio: StudioAccess, id: string): Promise<Reading> {
  return shown(requireFound(await find(db(), studio.id, id)))
}

/** Keeps measured values as a reading of a bench; from then on the bench's combination is fixed. */
export async function createReading(studio: StudioAccess, benchId: string, input: MeasuredInput): Promise<{ created: boolean, item: Reading }> {
  const { id, bodyHash } = identity(benchId, input)
  const read = measure(requireFound(await findBench(db(), studio.id, benchId)), input)
  return await db().transaction(async (tx) => {
    // Locked against a change of the combination, and asked again: it may have been put away since.
    requireReadable(await lockBench(tx, studio.id, benchId))
    const { created, row } = await createOnce(bodyHash,
      async () => (await tx.insert(readings).values({
        studioId: studio.id, id, benchId, state: 'ready', quality: 'measured', unit: read.unit, zero: read.zero, paperLightness: read.paperLightness,
        patches: read.patches.map(({ level, lightness, lab }) => ({ level, lightness, lab, deviation: null, used: true })), warnings: read.warnings, bodyHash, createdBy: studio.personId,
      }).onConflictDoNothing().returning())[0],
      () => find(tx, studio.id, id))
    if (created) {
      await recordEvent(tx, { studioId: studio.id, userId: studio.personId, kind: 'readings.created', recordId: id, details: { benchId, patches: read.patches.length } })
      await hint(tx, { studioId: studio.id, topic: 'readings', id })
    }
    return { created, item: shown(row) }
  })
}

function identity(benchId: string, input: MeasuredInput): { id: string, bodyHash: string } {
  const sent = 'body' in input ? input.body : input.query
  return { id: idFor(sent), bodyHash: bodyHashOf({ ...sent, text: 'text' in input ? input.text : undefined, benchId }) }
}

function measure(bench: BenchRow, input: MeasuredInput): Measurements {
  requireReadable(bench)
  const { zero, paperLightness } = 'body' in input ? input.body : input.query
  return readMeasurements('body' in input ? input.body : input.text, { zero, paperLightness, channel: bench.readingChannel })
}

function requireReadable(bench: BenchRow): void {
  if (bench.starter) throw new ComputeError('combination_fixed', 'This bench is the service’s own and rests on assumptions. Make a copy of it for your paper, film and lamp, and read your wedge there.')
  if (bench.archivedAt) throw new ComputeError('wrong_state', 'This bench has been put away. Make a copy of it to go on.')
  if (bench.readingChannel === 'colour-path') throw new ComputeError('wrong_state', 'This bench is read along its own colour path, which typed values don’t tell. Choose lightness or a density as its reading channel.')
}

async function find(on: Queryable, studioId: string, id: string): Promise<ReadingRow | undefined> {
  return (await on.select().from(readings).where(and(eq(readings.studioId, studioId), eq(readings.id, id))))[0]
}

const shown = ({ id, benchId, state, quality, unit, zero, paperLightness, corners, patches, warnings, createdAt, wedgeId, wedgePrintId, scannerId, scannerProfileId, progress, errorCode, errorMessage, evidence }: ReadingRow, printNumber: number | null = null): Reading => ({
  id, benchId, state, quality, unit, zero, paperLightness, corners, patches, warnings, createdAt: createdAt.toISOString(),
  wedgeId, wedgePrintId, printNumber, scannerId, scannerProfileId, progress, error: errorCode === null ? null : { code: errorCode, message: errorMessage ?? '' }, evidence,
})
