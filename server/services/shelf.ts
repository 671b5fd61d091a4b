import { and, eq, isNotNull, isNull, sql } from 'drizzle-orm'
import type { z } from 'zod'
import { factsOf, type shelfBody, type ShelfItem, type ShelfKind, type shelfPatch, type ShelfRecord } from '#shared/schemas/shelf'
import { db, type Queryable, type Transaction } from '../db/client'
import { films, inkjets, lamps, papers, scanners, sensitizers } from '../db/schema'
import type { StudioAccess } from './access'
import { recordEvent } from './audit'
import { bodyHashOf, createOnce, idFor } from './creation'
import { hint } from './hints'
import { keyset, toPage, type Page } from './paging'
import { requireCurrent, requireFound } from './revisions'
import { benchCounts, benchesOn } from './shelf-uses'

/** Six tables of one shape: what may stand in `facts` is held apart by `factsOf`, not by the table. */
export const drawers = { papers, sensitizers, films, inkjets, lamps, scanners } as unknown as Record<ShelfKind, typeof papers>
export type ShelfRow = typeof papers.$inferSelect

export const shelfView = (kind: ShelfKind, { id, name, notes, facts, archivedAt, createdAt, revision }: Omit<ShelfRow, 'studioId' | 'bodyHash'>, benchCount: number) =>
  ({ kind, id, name, notes, facts, benchCount, archivedAt: archivedAt?.toISOString() ?? null, createdAt: createdAt.toISOString(), revision }) as ShelfItem

export async function listShelf(studio: StudioAccess, kind: ShelfKind, page: Page & { archived?: boolean }) {
  const drawer = drawers[kind]
  const { after, order, take } = keyset(drawer.id, page)
  const rows = await db().select().from(drawer)
    .where(and(eq(drawer.studioId, studio.id), page.archived ? isNotNull(drawer.archivedAt) : isNull(drawer.archivedAt), after)).orderBy(order).limit(take)
  const counts = await benchCounts(db(), studio.id, rows.map(row => row.id))
  return toPage(rows, page, row => shelfView(kind, row, counts.get(row.id) ?? 0))
}

export async function shelfItem(studio: StudioAccess, kind: ShelfKind, id: string): Promise<ShelfRecord> {
  const row = requireFound(await find(db(), studio, kind, id))
  return { ...await viewOf(db(), kind, row), benches: await benchesOn(db(), studio.id, id) }
}

export async function createShelfItem(studio: StudioAccess, kind: ShelfKind, body: z.infer<typeof shelfBody>): Promise<{ created: boolean, item: ShelfItem }> {
  const id = idFor(body)
  const facts = factsOf(kind, body.facts ?? {}) as ShelfRow['facts']
  const bodyHash = bodyHashOf(body)
  return await db().transaction(async (tx) => {
    const { created, row } = await createOnce(bodyHash,
      async () => (await tx.insert(drawers[kind]).values({ studioId: studio.id, id, name: body.name, notes: body.notes, facts, bodyHash }).onConflictDoNothing().returning())[0],
      () => find(tx, studio, kind, id))
    if (created) await tell(tx, studio, kind, row, 'created')
    return { created, item: await viewOf(tx, kind, row) }
  })
}

export async function changeShelfItem(studio: StudioAccess, kind: ShelfKind, id: string, { revision, facts, ...changes }: z.infer<typeof shelfPatch>): Promise<ShelfItem> {
  const checked = facts && { facts: factsOf(kind, facts) as ShelfRow['facts'] }
  return await update(studio, kind, id, revision, 'changed', { ...changes, ...checked })
}

export async function archiveShelfItem(studio: StudioAccess, kind: ShelfKind, id: string, revision: number): Promise<ShelfItem> {
  return await update(studio, kind, id, revision, 'archived', { archivedAt: new Date() })
}

export async function restoreShelfItem(studio: StudioAccess, kind: ShelfKind, id: string, revision: number): Promise<ShelfItem> {
  return await update(studio, kind, id, revision, 'restored', { archivedAt: null })
}

async function update(studio: StudioAccess, kind: ShelfKind, id: string, revision: number, verb: string, changes: Partial<Pick<ShelfRow, 'name' | 'notes' | 'facts' | 'archivedAt'>>): Promise<ShelfItem> {
  const drawer = drawers[kind]
  return await db().transaction(async (tx) => {
    const [locked] = await tx.select().from(drawer).where(and(eq(drawer.studioId, studio.id), eq(drawer.id, id))).for('update')
    requireCurrent(locked, revision)
    const [row] = await tx.update(drawer).set({ ...changes, revision: sql`${drawer.revision} + 1` })
      .where(and(eq(drawer.studioId, studio.id), eq(drawer.id, id))).returning()
    await tell(tx, studio, kind, row!, verb)
    return await viewOf(tx, kind, row!)
  })
}

const viewOf = async (on: Queryable, kind: ShelfKind, row: ShelfRow) => shelfView(kind, row, (await benchCounts(on, row.studioId, [row.id])).get(row.id) ?? 0)

async function find(on: Queryable, studio: StudioAccess, kind: ShelfKind, id: string): Promise<ShelfRow | undefined> {
  return (await on.select().from(drawers[kind]).where(and(eq(drawers[kind].studioId, studio.id), eq(drawers[kind].id, id))))[0]
}

async function tell(tx: Transaction, studio: StudioAccess, kind: ShelfKind, { id, revision }: ShelfRow, verb: string): Promise<void> {
  await recordEvent(tx, { studioId: studio.id, userId: studio.personId, kind: `${kind}.${verb}`, recordId: id })
  await hint(tx, { studioId: studio.id, topic: kind, id, revision })
}
