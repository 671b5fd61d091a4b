import { randomBytes } from 'node:crypto'
import { and, count, eq, inArray, isNull, sql } from 'drizzle-orm'
import type { z } from 'zod'
import { chartPage } from '#shared/calibration/wedge/chart'
import { identityFromBytes, identityLength } from '#shared/calibration/wedge/identity-code'
import { onSheet, placeOnSheet, sheetFor } from '#shared/calibration/wedge/sheet'
import { ComputeError } from '#shared/errors'
import type { Wedge, wedgeBody, WedgeBrief, WedgeKind } from '#shared/schemas/wedges'
import { pixelsFromMm } from '#shared/sheet/pixels'
import { db, type Queryable, type Transaction } from '../db/client'
import { curves, wedgePrints, wedges } from '../db/schema'
import type { StudioAccess } from './access'
import { recordEvent } from './audit'
import { findBench, type BenchRow } from './benches'
import { bodyHashOf, createOnce, idFor } from './creation'
import { requireFilmFits } from './film-limits'
import { hint } from './hints'
import { keyset, toPage, type Page } from './paging'
import { rendersByKey, showRender, type Render } from './renders'
import { requireFound } from './revisions'
import { chartOfParts } from './wedge-charts'
import { wedgeFilmKeys } from './wedge-films'
import { findWedge, readWedgeParts, requireWedgeParts, type WedgeParts, type WedgeRow } from './wedge-parts'
import { planWedge } from './wedge-plans'

/** Where the bench's path says nothing of it. */
const usualPixelsPerInch = 360
/** 2⁴⁵ codes: a second try is all but never needed. */
const codeTries = 5

export async function listWedges(studio: StudioAccess, benchId: string, page: Page & { kind?: WedgeKind }) {
  requireFound(await findBench(db(), studio.id, benchId))
  const { after, order, take } = keyset(wedges.id, page)
  const ofKind = page.kind ? eq(wedges.kind, page.kind) : undefined
  const parts = await readWedgeParts(db(), and(eq(wedges.studioId, studio.id), eq(wedges.benchId, benchId), isNull(wedges.archivedAt), ofKind, after), order, take)
  const briefs = await briefsOf(db(), studio.id, parts)
  return toPage(parts.map(({ wedge }) => wedge), page, ({ id }) => briefs.get(id)!)
}

export async function wedgeOf(studio: StudioAccess, id: string): Promise<Wedge> {
  return view(db(), await requireWedgeParts(studio.id, id))
}

/** Lays a wedge out and keeps what it is laid out from, with the bench's ink and path as they are now. */
export async function createWedge(studio: StudioAccess, benchId: string, body: z.infer<typeof wedgeBody>): Promise<{ created: boolean, item: Wedge }> {
  const bench = requireFound(await findBench(db(), studio.id, benchId))
  requirePrintable(bench)
  const values = { ...layOut(bench, body), studioId: studio.id, benchId, id: idFor(body), bodyHash: bodyHashOf({ ...body, benchId }), createdBy: studio.personId }
  return db().transaction(async (tx) => {
    if (body.throughCurveId) await requireCurve(tx, studio.id, benchId, body.throughCurveId)
    const { created, row } = await createOnce(values.bodyHash, () => insertWedge(tx, values), () => findWedge(tx, studio.id, values.id))
    if (created) await tell(tx, studio, row, 'created')
    return { created, item: await view(tx, await requireWedgeParts(studio.id, row.id, tx)) }
  })
}

function layOut(bench: BenchRow, body: z.infer<typeof wedgeBody>) {
  const pixelsPerInch = body.pixelsPerInch ?? bench.path.pixelsPerInch ?? usualPixelsPerInch
  const plan = planWedge(body)
  const sheet = sheetFor(chartPage(plan, pixelsPerInch), body.page)
  requireFilmFits({ widthPixels: pixelsFromMm(sheet.widthMm, pixelsPerInch), heightPixels: pixelsFromMm(sheet.heightMm, pixelsPerInch) }, pixelsPerInch)
  return { kind: plan.kind, plan, ...sheet, pixelsPerInch, throughCurveId: body.throughCurveId, inkColor: bench.ink.color, path: bench.path }
}

/** A code that exists already, in whatever studio, is drawn again; an id that exists gives nothing. */
async function insertWedge(tx: Transaction, values: Omit<typeof wedges.$inferInsert, 'code'> & { id: string, studioId: string }): Promise<WedgeRow | undefined> {
  for (let attempt = 0; attempt < codeTries; attempt++) {
    const code = identityFromBytes(randomBytes(identityLength))
    const [row] = await tx.insert(wedges).values({ ...values, code }).onConflictDoNothing().returning()
    if (row || await findWedge(tx, values.studioId, values.id)) return row
  }
  throw new Error('No free wedge code was found.')
}

/** Put away: in no list any more. Prints and readings of it stay. */
export async function archiveWedge(studio: StudioAccess, id: string): Promise<void> {
  await db().transaction(async (tx) => {
    const wedge = requireFound(await findWedge(tx, studio.id, id))
    if (wedge.archivedAt) return
    await tx.update(wedges).set({ archivedAt: sql`now()` }).where(and(eq(wedges.studioId, studio.id), eq(wedges.id, id)))
    await tell(tx, studio, wedge, 'archived')
  })
}

/** Wedges are for benches that a person has set up and works on. */
export function requirePrintable(bench: BenchRow): void {
  if (bench.starter) throw new ComputeError('combination_fixed', 'This bench is the service’s own and rests on assumptions. Make a copy of it for your paper, film and lamp, and put your wedge on film there.')
  if (bench.archivedAt) throw new ComputeError('wrong_state', 'This bench has been put away. Make a copy of it to go on.')
}

async function requireCurve(on: Queryable, studioId: string, benchId: string, id: string): Promise<void> {
  const [curve] = await on.select({ id: curves.id }).from(curves).where(and(eq(curves.studioId, studioId), eq(curves.benchId, benchId), eq(curves.id, id)))
  if (!curve) throw new ComputeError('invalid_input', 'This bench has no such curve.', [{ path: 'throughCurveId', message: 'Choose a curve of this bench.' }])
}

async function tell(tx: Transaction, studio: StudioAccess, { id, benchId, kind }: WedgeRow, verb: string): Promise<void> {
  await recordEvent(tx, { studioId: studio.id, userId: studio.personId, kind: `wedges.${verb}`, recordId: id, details: { benchId, kind } })
  await hint(tx, { studioId: studio.id, topic: 'wedges', id })
}

async function view(on: Queryable, parts: WedgeParts): Promise<Wedge> {
  const { wedge } = parts
  const chart = chartOfParts(parts)
  const sheet = placeOnSheet(chart.page, wedge, wedge.pixelsPerInch)
  const brief = (await briefsOf(on, wedge.studioId, [parts])).get(wedge.id)!
  return { ...brief, patches: chart.patches.map((patch, i) => ({ ...patch, ...onSheet(sheet, chart.page.patches[i]!) })) }
}

async function briefsOf(on: Queryable, studioId: string, all: WedgeParts[]): Promise<Map<string, WedgeBrief>> {
  const keys = all.map(wedgeFilmKeys)
  const renders = await rendersByKey(studioId, keys.flat())
  const counts = await on.select({ wedgeId: wedgePrints.wedgeId, prints: count() }).from(wedgePrints)
    .where(and(eq(wedgePrints.studioId, studioId), inArray(wedgePrints.wedgeId, all.map(({ wedge }) => wedge.id)))).groupBy(wedgePrints.wedgeId)
  return new Map(all.map(({ wedge }, i) => [wedge.id, shown(wedge,
    keys[i]!.map(key => renders.get(key)).filter(row => row !== undefined).map(showRender),
    counts.find(({ wedgeId }) => wedgeId === wedge.id)?.prints ?? 0)]))
}

const shown = ({ id, benchId, code, kind, widthMm, heightMm, pixelsPerInch, throughCurveId, inkColor, path, plan, archivedAt, createdAt }: WedgeRow, renders: Render[], printCount: number): WedgeBrief => ({
  id, benchId, code, kind, page: { widthMm, heightMm }, pixelsPerInch, throughCurveId, inkColor, path, renders, printCount,
  exposureUnit: plan.kind === 'exposure-strip' ? plan.strip.unit : null,
  archivedAt: archivedAt?.toISOString() ?? null, createdAt: createdAt.toISOString(),
})
