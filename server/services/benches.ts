// Longer than most: a bench's view, its making, changing, copying and archiving belong together.
import { and, desc, eq, inArray, isNotNull, isNull, sql } from 'drizzle-orm'
import type { z } from 'zod'
import { ComputeError } from '#shared/errors'
import { combination, type Bench, type benchBody, type benchCopy, type benchPatch } from '#shared/schemas/benches'
import { db, type Queryable, type Transaction } from '../db/client'
import { baseExposures, benches, curves } from '../db/schema'
import type { StudioAccess } from './access'
import { recordEvent } from './audit'
import { addBaseExposure } from './base-exposures'
import { bodyHashOf, createOnce, idFor } from './creation'
import { hint } from './hints'
import { keyset, toPage, type Page } from './paging'
import { requireCurrent, requireFound } from './revisions'
import { printedBenches } from './shelf-uses'

export type BenchRow = typeof benches.$inferSelect
type Combination = Omit<z.infer<typeof benchBody>, 'id' | 'name' | 'baseExposure'>

export async function listBenches(studio: StudioAccess, page: Page & { archived?: boolean }) {
  const { after, order, take } = keyset(benches.id, page)
  const rows = await db().select().from(benches)
    .where(and(eq(benches.studioId, studio.id), page.archived ? isNotNull(benches.archivedAt) : isNull(benches.archivedAt), after)).orderBy(order).limit(take)
  const views = await viewsOf(db(), studio.id, rows)
  return toPage(rows, page, row => views.get(row.id)!)
}

export async function benchOf(studio: StudioAccess, id: string): Promise<Bench> {
  return await viewOf(db(), requireFound(await findBench(db(), studio.id, id)))
}

export async function findBench(on: Queryable, studioId: string, id: string): Promise<BenchRow | undefined> {
  return (await on.select().from(benches).where(and(eq(benches.studioId, studioId), eq(benches.id, id))))[0]
}

/** Locks a bench for work on its readings and curves; the combination can't change meanwhile. */
export async function lockBench(tx: Transaction, studioId: string, id: string): Promise<BenchRow> {
  const [row] = await tx.select().from(benches).where(and(eq(benches.studioId, studioId), eq(benches.id, id))).for('update')
  return requireFound(row)
}

export async function createBench(studio: StudioAccess, body: z.infer<typeof benchBody>): Promise<{ created: boolean, item: Bench }> {
  const { id: _, name, baseExposure, ...wanted } = body
  return await db().transaction(tx => insertBench(tx, studio, { id: idFor(body), bodyHash: bodyHashOf(body), name, baseExposure, wanted }))
}

/** A new bench with this one's combination, changed where the body says; its readings and curves stay behind. */
export async function copyBench(studio: StudioAccess, id: string, body: z.infer<typeof benchCopy>): Promise<{ created: boolean, item: Bench }> {
  const { id: _, name, baseExposure, ...changes } = body
  return await db().transaction(async (tx) => {
    const original = requireFound(await findBench(tx, studio.id, id))
    const wanted = { ...withoutNulls(combinationOf(original)), ...changes } as Combination
    return await insertBench(tx, studio, { id: idFor(body), bodyHash: bodyHashOf({ ...body, copyOf: id }), name: name ?? `${original.name.slice(0, 110)}, copy`, baseExposure, wanted })
  })
}

interface NewBench { id: string, bodyHash: string, name: string, baseExposure?: z.infer<typeof benchBody>['baseExposure'], wanted: Combination }

async function insertBench(tx: Transaction, studio: StudioAccess, { id, bodyHash, name, baseExposure, wanted }: NewBench): Promise<{ created: boolean, item: Bench }> {
  const values = { studioId: studio.id, id, bodyHash, name, ...wanted, ...benchDefaults(wanted) }
  const { created, row } = await createOnce(bodyHash,
    async () => (await tx.insert(benches).values(values).onConflictDoNothing({ target: [benches.studioId, benches.id] }).returning())[0],
    () => findBench(tx, studio.id, id))
  if (created) {
    if (baseExposure) await addBaseExposure(tx, studio, id, baseExposure)
    await tell(tx, studio, row, 'created')
  }
  return { created, item: await viewOf(tx, row) }
}

/** All single-contact processes print from a mirrored film; single-transfer carbon turns the picture over by itself. */
export const benchDefaults = ({ process, ink, readingChannel, mirror }: Pick<Combination, 'process' | 'ink' | 'readingChannel' | 'mirror'>) =>
  ({ ink: ink ?? { color: '#000000' }, readingChannel: readingChannel ?? 'lightness' as const, mirror: mirror ?? process !== 'carbon' })

export async function changeBench(studio: StudioAccess, id: string, { revision, name, baseExposure, ...changes }: z.infer<typeof benchPatch>): Promise<Bench> {
  return await db().transaction(async (tx) => {
    const bench = requireCurrent(await lockBench(tx, studio.id, id), revision)
    await requireChangeable(tx, bench, changes)
    if (baseExposure) await addBaseExposure(tx, studio, id, baseExposure)
    return await viewOf(tx, await update(tx, studio, bench, 'changed', { name, ...changes }))
  })
}

export async function archiveBench(studio: StudioAccess, id: string, revision: number): Promise<Bench> {
  return await db().transaction(async (tx) => {
    const bench = requireCurrent(await lockBench(tx, studio.id, id), revision)
    if (bench.starter) throw new ComputeError('wrong_state', 'This bench is the service’s own for its process and stays. Benches that you set up can be put away.')
    return await viewOf(tx, await update(tx, studio, bench, 'archived', { archivedAt: bench.archivedAt ?? new Date() }))
  })
}

async function update(tx: Transaction, studio: StudioAccess, { id }: BenchRow, verb: string, changes: Partial<BenchRow>): Promise<BenchRow> {
  const [row] = await tx.update(benches).set({ ...changes, revision: sql`${benches.revision} + 1` })
    .where(and(eq(benches.studioId, studio.id), eq(benches.id, id))).returning()
  await tell(tx, studio, row!, verb)
  return row!
}

/** A combination that has been printed or read, or that is the service's own, gives one set of tones and keeps it. */
async function requireChangeable(tx: Transaction, bench: BenchRow, changes: Record<string, unknown>): Promise<void> {
  const before = combinationOf(bench)
  const changed = Object.entries(changes).filter(([field, value]) => value !== undefined && bodyHashOf({ value }) !== bodyHashOf({ value: before[field as keyof typeof before] }))
  if (!changed.length || !(bench.starter || (await printedBenches(tx, bench.studioId, [bench.id])).has(bench.id))) return
  throw new ComputeError('combination_fixed',
    `${bench.starter ? 'This bench is the service’s own, so its combination stays.' : 'This bench has wedge prints or readings, and they hold for its combination only.'} Make a copy of it (POST …/benches/${bench.id}/copy) with the change; they stay with this one.`,
    changed.map(([path]) => ({ path, message: 'Change this in a copy.' })))
}

const combinationOf = (row: BenchRow) => Object.fromEntries(Object.keys(combination).map(field => [field, row[field as keyof typeof combination]])) as Pick<BenchRow, keyof typeof combination>

const withoutNulls = <T extends object>(record: T) => Object.fromEntries(Object.entries(record).filter(([, value]) => value !== null))

async function tell(tx: Transaction, studio: StudioAccess, { id, revision }: BenchRow, verb: string): Promise<void> {
  await recordEvent(tx, { studioId: studio.id, userId: studio.personId, kind: `benches.${verb}`, recordId: id })
  await hint(tx, { studioId: studio.id, topic: 'benches', id, revision })
}

export async function viewOf(on: Queryable, row: BenchRow): Promise<Bench> {
  return (await viewsOf(on, row.studioId, [row])).get(row.id)!
}

/** Benches as they are shown, with the newest base exposure and the curve in use of each. */
async function viewsOf(on: Queryable, studioId: string, rows: BenchRow[]): Promise<Map<string, Bench>> {
  const ids = rows.map(row => row.id)
  const exposures = await on.selectDistinctOn([baseExposures.benchId]).from(baseExposures)
    .where(and(eq(baseExposures.studioId, studioId), inArray(baseExposures.benchId, ids))).orderBy(baseExposures.benchId, desc(baseExposures.id))
  const inUse = await on.select({
    benchId: curves.benchId, id: curves.id, version: curves.version, calibrated: curves.calibrated, assumptions: curves.assumptions,
    blackLightness: sql<number>`(${curves.response}->>0)::float8`, whiteLightness: sql<number>`(${curves.response}->>1024)::float8`,
  }).from(curves).where(and(eq(curves.studioId, studioId), inArray(curves.benchId, ids), eq(curves.state, 'in-use')))
  const printed = await printedBenches(on, studioId, ids)
  return new Map(rows.map((row) => {
    const exposure = exposures.find(e => e.benchId === row.id)
    const curve = inUse.find(c => c.benchId === row.id)
    return [row.id, { ...shown(row, exposure, curve), combinationFixed: row.starter || printed.has(row.id) }]
  }))
}

function shown(row: BenchRow, exposure: typeof baseExposures.$inferSelect | undefined, curve: (NonNullable<Bench['curveInUse']> & { assumptions: string[] }) | undefined): Omit<Bench, 'combinationFixed'> {
  const { studioId: _, bodyHash: __, archivedAt, createdAt, ...fields } = row
  return {
    ...fields,
    assumptions: curve?.assumptions ?? [],
    baseExposure: exposure ? { value: exposure.value, unit: exposure.unit, low: exposure.low, high: exposure.high, since: exposure.createdAt.toISOString() } : null,
    curveInUse: curve ? { id: curve.id, version: curve.version, calibrated: curve.calibrated, blackLightness: curve.blackLightness, whiteLightness: curve.whiteLightness } : null,
    archivedAt: archivedAt?.toISOString() ?? null, createdAt: createdAt.toISOString(),
  }
}
