import { and, eq, max, sql } from 'drizzle-orm'
import { v7 as uuidv7 } from 'uuid'
import type { z } from 'zod'
import { ComputeError } from '#shared/errors'
import type { wedgePrintBody, wedgePrintPatch, WedgePrintRecord } from '#shared/schemas/wedges'
import { db, type Queryable, type Transaction } from '../db/client'
import { wedgePrints } from '../db/schema'
import type { StudioAccess } from './access'
import { recordEvent } from './audit'
import { lockBench } from './benches'
import { bodyHashOf, createOnce, idFor } from './creation'
import { hint } from './hints'
import { keyset, toPage, type Page } from './paging'
import { requireCurrent, requireFound } from './revisions'
import { findWedge, type WedgeRow } from './wedge-parts'
import { requirePrintable } from './wedges'

export type WedgePrintRow = typeof wedgePrints.$inferSelect

export async function listWedgePrints(studio: StudioAccess, wedgeId: string, page: Page) {
  requireFound(await findWedge(db(), studio.id, wedgeId))
  const { after, order, take } = keyset(wedgePrints.id, page)
  const rows = await db().select().from(wedgePrints).where(and(ofWedge(studio.id, wedgeId), after)).orderBy(order).limit(take)
  return toPage(rows, page, showWedgePrint)
}

export async function createWedgePrint(studio: StudioAccess, wedgeId: string, body: z.infer<typeof wedgePrintBody>): Promise<{ created: boolean, item: WedgePrintRecord }> {
  const { id: _, number, exposure, exposedAt, driedSince, notes } = body
  const [id, bodyHash] = [idFor(body), bodyHashOf({ ...body, wedgeId })]
  return db().transaction(async (tx) => {
    const wedge = requireFound(await findWedge(tx, studio.id, wedgeId))
    // Locked, so that numbers follow each other and the bench's combination stays what is printed.
    requirePrintable(await lockBench(tx, studio.id, wedge.benchId))
    const { created, row } = await createOnce(bodyHash, async () => {
      if (await find(tx, studio.id, id)) return undefined
      if (number !== undefined) await requireFree(tx, wedge, number)
      return insert(tx, studio, wedge, {
        id, bodyHash, number: number ?? await nextNumber(tx, wedge), notes,
        exposureValue: exposure?.value, exposureUnit: exposure?.unit, exposedAt: asDate(exposedAt), driedSince: asDate(driedSince),
      })
    }, () => find(tx, studio.id, id))
    return { created, item: showWedgePrint(row) }
  })
}

/**
 * The print of a wedge that a reading belongs to: the one with this number, or the newest; made where there is none yet.
 * Holds the bench's lock until the transaction ends.
 */
export async function findOrMakeWedgePrint(tx: Transaction, studio: StudioAccess, wedge: WedgeRow, number?: number): Promise<WedgePrintRow> {
  await lockBench(tx, studio.id, wedge.benchId)
  const wanted = number ?? await newestNumber(tx, wedge) ?? 1
  const [stored] = await tx.select().from(wedgePrints).where(and(ofWedge(studio.id, wedge.id), eq(wedgePrints.number, wanted)))
  return stored ?? insert(tx, studio, wedge, { id: uuidv7(), bodyHash: bodyHashOf({ wedgeId: wedge.id, number: wanted }), number: wanted })
}

/** null takes something off; what is left out stays. */
export async function changeWedgePrint(studio: StudioAccess, id: string, { revision, exposure, driedSince, notes }: z.infer<typeof wedgePrintPatch>): Promise<WedgePrintRecord> {
  return db().transaction(async (tx) => {
    const [row] = await tx.select().from(wedgePrints).where(and(eq(wedgePrints.studioId, studio.id), eq(wedgePrints.id, id))).for('update')
    requireCurrent(row, revision)
    const [changed] = await tx.update(wedgePrints).set({
      ...exposure === undefined ? {} : { exposureValue: exposure?.value ?? null, exposureUnit: exposure?.unit ?? null },
      ...driedSince === undefined ? {} : { driedSince: asDate(driedSince) ?? null },
      notes, revision: sql`${wedgePrints.revision} + 1`,
    }).where(and(eq(wedgePrints.studioId, studio.id), eq(wedgePrints.id, id))).returning()
    await tell(tx, studio, changed!, 'changed')
    return showWedgePrint(changed!)
  })
}

async function insert(tx: Transaction, studio: StudioAccess, wedge: WedgeRow, values: Pick<typeof wedgePrints.$inferInsert, 'id' | 'bodyHash' | 'number'> & Partial<typeof wedgePrints.$inferInsert>): Promise<WedgePrintRow> {
  const [row] = await tx.insert(wedgePrints).values({ ...values, studioId: studio.id, wedgeId: wedge.id, benchId: wedge.benchId, createdBy: studio.personId }).returning()
  await tell(tx, studio, row!, 'created')
  return row!
}

async function requireFree(on: Queryable, wedge: WedgeRow, number: number): Promise<void> {
  const [taken] = await on.select({ id: wedgePrints.id }).from(wedgePrints).where(and(ofWedge(wedge.studioId, wedge.id), eq(wedgePrints.number, number)))
  if (taken) throw new ComputeError('invalid_input', `There is a print ${number} of this wedge already. Leave the number out and the next free one is taken.`, [{ path: 'number', message: 'This number is taken.' }])
}

async function newestNumber(on: Queryable, wedge: WedgeRow): Promise<number | null> {
  const [row] = await on.select({ number: max(wedgePrints.number) }).from(wedgePrints).where(ofWedge(wedge.studioId, wedge.id))
  return row?.number ?? null
}

const nextNumber = async (on: Queryable, wedge: WedgeRow): Promise<number> => (await newestNumber(on, wedge) ?? 0) + 1

const ofWedge = (studioId: string, wedgeId: string) => and(eq(wedgePrints.studioId, studioId), eq(wedgePrints.wedgeId, wedgeId))

async function find(on: Queryable, studioId: string, id: string): Promise<WedgePrintRow | undefined> {
  return (await on.select().from(wedgePrints).where(and(eq(wedgePrints.studioId, studioId), eq(wedgePrints.id, id))))[0]
}

const asDate = (instant: string | null | undefined): Date | undefined => instant ? new Date(instant) : undefined

async function tell(tx: Transaction, studio: StudioAccess, { id, wedgeId, number, revision }: WedgePrintRow, verb: string): Promise<void> {
  await recordEvent(tx, { studioId: studio.id, userId: studio.personId, kind: `wedge-prints.${verb}`, recordId: id, details: { wedgeId, number } })
  await hint(tx, { studioId: studio.id, topic: 'wedge-prints', id, revision })
}

const hoursSince = (instant: Date): number => Math.max(0, Math.round((Date.now() - instant.getTime()) / 36_000) / 100)

export const showWedgePrint = ({ id, wedgeId, benchId, number, exposureValue, exposureUnit, exposedAt, driedSince, notes, createdAt, revision }: WedgePrintRow): WedgePrintRecord => ({
  id, wedgeId, benchId, number, exposure: exposureValue === null || exposureUnit === null ? null : { value: exposureValue, unit: exposureUnit },
  exposedAt: exposedAt?.toISOString() ?? null, driedSince: driedSince?.toISOString() ?? null, driedHours: driedSince && hoursSince(driedSince),
  notes, createdAt: createdAt.toISOString(), revision,
})
