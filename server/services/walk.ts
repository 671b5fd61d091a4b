import { and, eq, inArray, isNull, notExists, or, sql } from 'drizzle-orm'
import type { z } from 'zod'
import { isDoneByRecords, optionalSteps, stepNow, type WalkRecords } from '#shared/calibration/walk-states'
import { walkSteps, type Walk, type walkPatch, type WalkStep } from '#shared/schemas/calibration'
import { db, type Queryable } from '../db/client'
import { baseExposures, curveReadings, curves, readings, walkStepRows, wedgePrints, wedges } from '../db/schema'
import type { StudioAccess } from './access'
import { recordEvent } from './audit'
import { findBench, lockBench, type BenchRow } from './benches'
import { hint } from './hints'
import { requireCurrent, requireFound } from './revisions'

type StepRow = typeof walkStepRows.$inferSelect

export async function walkOf(studio: StudioAccess, benchId: string): Promise<Walk> {
  return await viewOf(db(), requireFound(await findBench(db(), studio.id, benchId)))
}

/** Keeps what a person says of a step; the bench's lock makes two people at once come one after the other. */
export async function changeWalkStep(studio: StudioAccess, benchId: string, step: WalkStep, { revision, state, clockSeconds, notes }: z.infer<typeof walkPatch>): Promise<Walk> {
  return await db().transaction(async (tx) => {
    const bench = await lockBench(tx, studio.id, benchId)
    const ofStep = and(eq(walkStepRows.studioId, studio.id), eq(walkStepRows.benchId, benchId), eq(walkStepRows.step, step))
    const [row] = await tx.select().from(walkStepRows).where(ofStep)
    requireCurrent({ revision: row?.revision ?? 0 }, revision)
    const clock = clockSeconds === undefined ? {} : { clockSeconds, clockStartedAt: clockSeconds === null ? null : new Date() }
    const changes = { state, notes, ...clock, changedBy: studio.personId, changedAt: new Date() }
    if (row) await tx.update(walkStepRows).set({ ...changes, revision: sql`${walkStepRows.revision} + 1` }).where(ofStep)
    else await tx.insert(walkStepRows).values({ studioId: studio.id, benchId, step, ...changes })
    await recordEvent(tx, { studioId: studio.id, userId: studio.personId, kind: 'walk.changed', recordId: benchId, details: { step, state, clockSeconds } })
    await hint(tx, { studioId: studio.id, topic: 'walk', id: benchId })
    return await viewOf(tx, bench)
  })
}

async function viewOf(on: Queryable, bench: BenchRow): Promise<Walk> {
  const said = await on.select().from(walkStepRows).where(and(eq(walkStepRows.studioId, bench.studioId), eq(walkStepRows.benchId, bench.id)))
  const records = await recordsOf(on, bench)
  const steps = walkSteps.map(step => shown(step, said.find(row => row.step === step), isDoneByRecords(step, records)))
  return { benchId: bench.id, now: stepNow(steps), steps }
}

const shown = (step: WalkStep, row: StepRow | undefined, isDone: boolean): Walk['steps'][number] => ({
  step, state: row?.state ?? (isDone ? 'done' : 'open'), optional: optionalSteps.includes(step), clock: clockOf(row),
  notes: row?.notes ?? '', changedAt: row?.changedAt.toISOString() ?? null, revision: row?.revision ?? 0,
})

function clockOf(row: StepRow | undefined): Walk['steps'][number]['clock'] {
  if (!row?.clockStartedAt || !row.clockSeconds) return null
  const endsAt = new Date(row.clockStartedAt.getTime() + row.clockSeconds * 1000)
  return { startedAt: row.clockStartedAt.toISOString(), seconds: row.clockSeconds, endsAt: endsAt.toISOString() }
}

/** The records of a bench that speak of its calibration, counted by the database. */
async function recordsOf(on: Queryable, { studioId, id, path }: BenchRow): Promise<WalkRecords> {
  const ofBench = <T extends typeof wedges | typeof wedgePrints | typeof readings | typeof curves | typeof baseExposures>(table: T) => and(eq(table.studioId, studioId), eq(table.benchId, id))
  const isOfSteps = or(isNull(wedges.kind), inArray(wedges.kind, ['scattered', 'numbered']))
  const inNoCurve = notExists(on.select({ one: sql`1` }).from(curveReadings).where(and(eq(curveReadings.studioId, studioId), eq(curveReadings.readingId, readings.id))))
  const [exposures, films, prints, [read], versions] = await Promise.all([
    on.$count(baseExposures, ofBench(baseExposures)),
    on.$count(wedges, and(ofBench(wedges), isOfSteps, isNull(wedges.archivedAt))),
    on.select({ at: wedgePrints.createdAt, isRead: sql<boolean>`exists (${on.select({ one: sql`1` }).from(readings).where(and(eq(readings.studioId, studioId), eq(readings.wedgePrintId, wedgePrints.id), eq(readings.state, 'ready')))})` })
      .from(wedgePrints).innerJoin(wedges, and(eq(wedges.studioId, wedgePrints.studioId), eq(wedges.id, wedgePrints.wedgeId))).where(and(ofBench(wedgePrints), isOfSteps)),
    on.select({
      ofSteps: sql<number>`count(*) filter (where ${isOfSteps})::int`, unfitted: sql<number>`count(*) filter (where ${isOfSteps} and ${inNoCurve})::int`,
      inkTrials: sql<number>`count(*) filter (where ${wedges.kind} = 'ink-trial')::int`, checks: sql<number>`count(*) filter (where ${wedges.throughCurveId} is not null)::int`,
      newest: sql<Date | null>`max(${readings.createdAt}) filter (where ${isOfSteps})`.mapWith(readings.createdAt),
    }).from(readings).leftJoin(wedges, and(eq(wedges.studioId, readings.studioId), eq(wedges.id, readings.wedgeId))).where(and(ofBench(readings), eq(readings.state, 'ready'))),
    on.select({ state: curves.state, version: curves.version, calibrated: curves.calibrated }).from(curves).where(ofBench(curves)),
  ])
  const inUse = versions.find(curve => curve.state === 'in-use')
  const newest = read!.newest
  return {
    isPathWritten: Boolean(path.fileKind && path.pixelsPerInch && path.colourAdjustment), hasBaseExposure: exposures > 0, stepWedges: films,
    prints: prints.length, unreadPrints: prints.filter(print => !print.isRead && (newest === null || print.at > newest)).length,
    readings: read!.ofSteps, unfittedReadings: read!.unfitted, inkTrialReadings: read!.inkTrials, checkReadings: read!.checks,
    hasDraftAhead: versions.some(curve => curve.state === 'draft' && curve.version > (inUse?.version ?? 0)), hasCurveInUse: inUse?.calibrated ?? false,
  }
}
