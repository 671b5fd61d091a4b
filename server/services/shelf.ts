import { and, eq, isNotNull, isNull, sql } from 'drizzle-orm'
import type { z } from 'zod'
import type { shelfBody, ShelfItem, ShelfKind, shelfPatch } from '#shared/schemas/shelf'
import { db, type Queryable, type Transaction } from '../db/client'
import { films, inkjets, lamps, papers, scanners, sensitizers } from '../db/schema'
import type { StudioAccess } from './access'
import { recordEvent } from './audit'
import { bodyHashOf, createOnce, idFor } from './creation'
import { hint } from './hints'
import { keyset, toPage, type Page } from './paging'
import { requireCurrent, requireFound } from './revisions'

const drawers = { papers, sensitizers, films, inkjets, lamps, scanners } satisfies Record<ShelfKind, typeof papers>
type Row = typeof papers.$inferSelect

const shown = ({ id, name, notes, archivedAt, createdAt, revision }: Row): ShelfItem =>
  ({ id, name, notes, archivedAt: archivedAt?.toISOString() ?? null, createdAt: createdAt.toISOString(), revision })

export async function listShelf(studio: StudioAccess, kind: ShelfKind, page: Page & { archived?: boolean }) {
  const drawer = drawers[kind]
  const { after, order, take } = keyset(drawer.id, page)
  const rows = await db().select().from(drawer)
    .where(and(eq(drawer.studioId, studio.id), page.archived ? isNotNull(drawer.archivedAt) : isNull(drawer.archivedAt), after)).orderBy(order).limit(take)
  return toPage(rows, page, shown)
}

export async function shelfItem(studio: StudioAccess, kind: ShelfKind, id: string): Promise<ShelfItem> {
  return shown(requireFound(await find(db(), studio, kind, id)))
}

export async function createShelfItem(studio: StudioAccess, kind: ShelfKind, body: z.infer<typeof shelfBody>): Promise<{ created: boolean, item: ShelfItem }> {
  const id = idFor(body)
  const bodyHash = bodyHashOf(body)
  return await db().transaction(async (tx) => {
    const { created, row } = await createOnce(bodyHash,
      async () => (await tx.insert(drawers[kind]).values({ studioId: studio.id, id, name: body.name, notes: body.notes, bodyHash }).onConflictDoNothing().returning())[0],
      () => find(tx, studio, kind, id))
    if (created) await tell(tx, studio, kind, row, 'created')
    return { created, item: shown(row) }
  })
}

export async function changeShelfItem(studio: StudioAccess, kind: ShelfKind, id: string, { revision, ...changes }: z.infer<typeof shelfPatch>): Promise<ShelfItem> {
  return await update(studio, kind, id, revision, 'changed', changes)
}

export async function archiveShelfItem(studio: StudioAccess, kind: ShelfKind, id: string, revision: number): Promise<ShelfItem> {
  return await update(studio, kind, id, revision, 'archived', { archivedAt: new Date() })
}

async function update(studio: StudioAccess, kind: ShelfKind, id: string, revision: number, verb: string, changes: Partial<Pick<Row, 'name' | 'notes' | 'archivedAt'>>): Promise<ShelfItem> {
  const drawer = drawers[kind]
  return await db().transaction(async (tx) => {
    const [locked] = await tx.select().from(drawer).where(and(eq(drawer.studioId, studio.id), eq(drawer.id, id))).for('update')
    requireCurrent(locked, revision)
    const [row] = await tx.update(drawer).set({ ...changes, revision: sql`${drawer.revision} + 1` })
      .where(and(eq(drawer.studioId, studio.id), eq(drawer.id, id))).returning()
    await tell(tx, studio, kind, row!, verb)
    return shown(row!)
  })
}

async function find(on: Queryable, studio: StudioAccess, kind: ShelfKind, id: string): Promise<Row | undefined> {
  return (await on.select().from(drawers[kind]).where(and(eq(drawers[kind].studioId, studio.id), eq(drawers[kind].id, id))))[0]
}

async function tell(tx: Transaction, studio: StudioAccess, kind: ShelfKind, { id, revision }: Row, verb: string): Promise<void> {
  await recordEvent(tx, { studioId: studio.id, userId: studio.personId, kind: `${kind}.${verb}`, recordId: id })
  await hint(tx, { studioId: studio.id, topic: kind, id, revision })
}
