// Longer than most: a curve's view, its fit and its passage from draft to retired belong together.
import { and, desc, eq, inArray, max, ne, sql } from 'drizzle-orm'
import type { z } from 'zod'
import { curvePoints } from '#shared/calibration/curve'
import type { CurveFit } from '#shared/calibration/curve-fit'
import { ComputeError } from '#shared/errors'
import type { Curve, CurveBrief, curveBody, curvePatch } from '#shared/schemas/curves'
import { aimForChannel } from '#shared/tone/aims'
import { db, type Queryable, type Transaction } from '../db/client'
import { curveReadings, curves, users } from '../db/schema'
import type { StudioAccess } from './access'
import { recordEvent } from './audit'
import { findBench, lockBench, type BenchRow } from './benches'
import { bodyHashOf, createOnce, idFor } from './creation'
import { fitOfReadings } from './curve-readings'
import { hint } from './hints'
import { keyset, toPage, type Page } from './paging'
import { requireCurrent, requireFound } from './revisions'

export type CurveRow = typeof curves.$inferSelect
type Body = z.infer<typeof curveBody>

export async function listCurves(studio: StudioAccess, benchId: string, page: Page) {
  requireFound(await findBench(db(), studio.id, benchId))
  const { after, order, take } = keyset(curves.id, page)
  const rows = await db().select({
    ...briefColumns, createdBy: users.name, blackLightness: sql<number>`(${curves.response}->>0)::float8`, whiteLightness: sql<number>`(${curves.response}->>1024)::float8`,
  }).from(curves).leftJoin(users, eq(users.id, curves.createdBy)).where(and(eq(curves.studioId, studio.id), eq(curves.benchId, benchId), after)).orderBy(order).limit(take)
  const readingsOf = await readingIdsOf(db(), studio.id, rows.map(row => row.id))
  return toPage(rows, page, row => brief(row, readingsOf.get(row.id)))
}

export async function curveOf(studio: StudioAccess, id: string): Promise<Curve> {
  return await view(db(), requireFound(await findCurve(db(), studio.id, id)))
}

export async function findCurve(on: Queryable, studioId: string, id: string): Promise<CurveRow | undefined> {
  return (await on.select().from(curves).where(and(eq(curves.studioId, studioId), eq(curves.id, id))))[0]
}

/** Fits a draft from readings of this bench. The fit runs in a child; the row is written after it, in one transaction. */
export async function createCurve(studio: StudioAccess, benchId: string, body: Body): Promise<{ created: boolean, item: Curve }> {
  const bench = requireFound(await findBench(db(), studio.id, benchId))
  if (bench.archivedAt) throw new ComputeError('wrong_state', 'This bench has been put away. Make a copy of it to go on.')
  const bodyHash = bodyHashOf({ ...body, benchId })
  const stored = body.id && await findCurve(db(), studio.id, body.id)
  const fit = stored ? undefined : await fitOfReadings(bench, body.readingIds)
  return await db().transaction(async (tx) => {
    const { created, row } = await createOnce(bodyHash, async () => fit && await insertDraft(tx, studio, bench, body, bodyHash, fit), async () => body.id ? await findCurve(tx, studio.id, body.id) : undefined)
    return { created, item: await view(tx, row) }
  })
}

async function insertDraft(tx: Transaction, studio: StudioAccess, { id: benchId, readingChannel }: BenchRow, body: Body, bodyHash: string, fit: CurveFit): Promise<CurveRow | undefined> {
  await lockBench(tx, studio.id, benchId)
  const [latest] = await tx.select({ version: max(curves.version) }).from(curves).where(and(eq(curves.studioId, studio.id), eq(curves.benchId, benchId)))
  const [row] = await tx.insert(curves).values({
    studioId: studio.id, id: idFor(body), benchId, version: (latest?.version ?? 0) + 1, state: 'draft', aim: aimForChannel(body.aim ?? 'even-lightness', readingChannel), calibrated: true,
    response: fit.response, responseLow: fit.low, responseHigh: fit.high, responseLowOfAll: fit.lowOfAll, responseHighOfAll: fit.highOfAll,
    expectedError: fit.expectedError, basis: fit.basis, colourPath: fit.colourPath, warnings: fit.warnings,
    notes: body.notes, bodyHash, createdBy: studio.personId,
  }).onConflictDoNothing({ target: [curves.studioId, curves.id] }).returning()
  if (!row) return undefined
  await tx.insert(curveReadings).values(body.readingIds.map(readingId => ({ studioId: studio.id, benchId, curveId: row.id, readingId })))
  await tell(tx, studio, row, 'created')
  return row
}

/** What is noted about a curve may change; its figures never do. */
export async function changeCurve(studio: StudioAccess, id: string, { revision, notes }: z.infer<typeof curvePatch>): Promise<Curve> {
  return await db().transaction(async (tx) => {
    requireCurrent(await lockCurve(tx, studio, id), revision)
    const [row] = await tx.update(curves).set({ notes, revision: sql`${curves.revision} + 1` })
      .where(and(eq(curves.studioId, studio.id), eq(curves.id, id))).returning()
    await tell(tx, studio, row!, 'changed')
    return await view(tx, row!)
  })
}

/** Puts a curve in use and retires the one before. All changes of a bench's curves wait for one another at its row. */
export async function useCurve(studio: StudioAccess, id: string): Promise<Curve> {
  return await db().transaction(async (tx) => {
    const curve = await lockCurve(tx, studio, id)
    if (curve.state === 'in-use') return await view(tx, curve)
    const before = await tx.update(curves).set({ state: 'retired' })
      .where(and(eq(curves.studioId, studio.id), eq(curves.benchId, curve.benchId), eq(curves.state, 'in-use'), ne(curves.id, id))).returning()
    for (const row of before) await tell(tx, studio, row, 'retired')
    return await view(tx, await setState(tx, studio, id, 'in-use'))
  })
}

export async function retireCurve(studio: StudioAccess, id: string): Promise<Curve> {
  return await db().transaction(async (tx) => {
    const curve = await lockCurve(tx, studio, id)
    if (!curve.calibrated) throw new ComputeError('wrong_state', 'A starter curve stays in use, so that everybody can begin. Set up a bench of your own for a better one.')
    return await view(tx, curve.state === 'retired' ? curve : await setState(tx, studio, id, 'retired'))
  })
}

async function lockCurve(tx: Transaction, studio: StudioAccess, id: string): Promise<CurveRow> {
  const { benchId } = requireFound(await findCurve(tx, studio.id, id))
  await lockBench(tx, studio.id, benchId)
  return requireFound(await findCurve(tx, studio.id, id))
}

async function setState(tx: Transaction, studio: StudioAccess, id: string, state: 'in-use' | 'retired'): Promise<CurveRow> {
  const [row] = await tx.update(curves).set({ state, ...(state === 'in-use' ? { inUseSince: sql`now()` } : {}) })
    .where(and(eq(curves.studioId, studio.id), eq(curves.id, id))).returning()
  await tell(tx, studio, row!, state === 'in-use' ? 'used' : 'retired')
  return row!
}

async function tell(tx: Transaction, studio: StudioAccess, { id, benchId, version }: CurveRow, verb: string): Promise<void> {
  await recordEvent(tx, { studioId: studio.id, userId: studio.personId, kind: `curves.${verb}`, recordId: id, details: { benchId, version } })
  await hint(tx, { studioId: studio.id, topic: 'curves', id })
  await hint(tx, { studioId: studio.id, topic: 'benches', id: benchId })
}

async function readingIdsOf(on: Queryable, studioId: string, curveIds: string[]): Promise<Map<string, string[]>> {
  const rows = await on.select({ curveId: curveReadings.curveId, readingId: curveReadings.readingId }).from(curveReadings)
    .where(and(eq(curveReadings.studioId, studioId), inArray(curveReadings.curveId, curveIds))).orderBy(desc(curveReadings.readingId))
  const found = new Map<string, string[]>()
  for (const { curveId, readingId } of rows) found.set(curveId, [...found.get(curveId) ?? [], readingId])
  return found
}

const briefColumns = {
  id: curves.id, benchId: curves.benchId, version: curves.version, state: curves.state, aim: curves.aim, calibrated: curves.calibrated, assumptions: curves.assumptions,
  expectedError: curves.expectedError, basis: curves.basis, warnings: curves.warnings, notes: curves.notes, createdAt: curves.createdAt, inUseSince: curves.inUseSince, revision: curves.revision,
}
type BriefRow = Pick<CurveRow, keyof typeof briefColumns> & { createdBy: string | null, blackLightness: number, whiteLightness: number }

const brief = ({ createdAt, inUseSince, ...row }: BriefRow, readingIds: string[] = []): CurveBrief =>
  ({ ...row, readingIds, createdAt: createdAt.toISOString(), inUseSince: inUseSince?.toISOString() ?? null })

async function view(on: Queryable, row: CurveRow): Promise<Curve> {
  const { studioId, bodyHash: _, createdBy: personId, response, responseLow, responseHigh, responseLowOfAll, responseHighOfAll, colourPath, ...fields } = row
  const readingIds = (await readingIdsOf(on, studioId, [row.id])).get(row.id)
  const [person] = personId ? await on.select({ name: users.name }).from(users).where(eq(users.id, personId)) : []
  return {
    ...brief({ ...fields, createdBy: person?.name ?? null, blackLightness: response[0]!, whiteLightness: response.at(-1)! }, readingIds),
    points: curvePoints(response, responseLow, responseHigh, row.aim), response, colourPath,
    bandOfAll: responseLowOfAll && responseHighOfAll && { low: responseLowOfAll, high: responseHighOfAll },
  }
}
