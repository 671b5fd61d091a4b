import { and, eq, sql } from 'drizzle-orm'
import type { z } from 'zod'
import { ComputeError } from '#shared/errors'
import type { classBody, classPatch, ClassRecord } from '#shared/schemas/classes'
import { limits } from '#shared/schemas/limits'
import { db, type Queryable, type Transaction } from '../db/client'
import { classes } from '../db/schema'
import type { StudioAccess } from './access'
import { recordEvent } from './audit'
import { newRoomCode } from './class-codes'
import { hintBoard, hintStudents } from './class-hints'
import { isOver, takeAlongUntil } from './class-times'
import { bodyHashOf, createOnce, idFor } from './creation'
import { publicOrigin } from './origin'
import { keyset, toPage, type Page } from './paging'
import { requireCurrent, requireFound } from './revisions'

type ClassRow = typeof classes.$inferSelect

// Columns of the outer query are written out: drizzle leaves their table's name away where it selects from one table.
const studentCount = sql<number>`(select count(*)::int from class_students s where s.studio_id = classes.studio_id and s.class_id = classes.id and s.removed_at is null)`
const handedInCount = sql<number>`(select count(*)::int from negatives n join class_students s on s.studio_id = n.studio_id and s.id = n.created_by
  where s.studio_id = classes.studio_id and s.class_id = classes.id and s.removed_at is null and n.handed_in_at is not null and n.archived_at is null)`
const counted = { id: classes.id, row: classes, studentCount, handedInCount }
type Counted = { row: ClassRow, studentCount: number, handedInCount: number }

export function showClass({ row, ...counts }: Counted): ClassRecord {
  const { studioId: _, bodyHash: __, openedBy: ___, joiningClosedAt, endsAt, erasedAt, roomCode, createdAt, ...fields } = row
  return {
    ...fields, ...counts, roomCode, endsAt: endsAt.toISOString(), takeAlongUntil: takeAlongUntil(endsAt).toISOString(), isOver: isOver(endsAt), erasedAt: erasedAt?.toISOString() ?? null,
    // After the #, so that no server's log and no referrer holds it.
    joinUrl: roomCode && `${publicOrigin()}/join#${roomCode}`,
    joiningOpen: joiningClosedAt === null && !isOver(endsAt), createdAt: createdAt.toISOString(),
  }
}

export async function listClasses(studio: StudioAccess, page: Page) {
  const { after, order, take } = keyset(classes.id, page)
  const rows = await db().select(counted).from(classes).where(and(eq(classes.studioId, studio.id), after)).orderBy(order).limit(take)
  return toPage(rows, page, showClass)
}

export async function classOf(studio: StudioAccess, id: string, on: Queryable = db()): Promise<ClassRecord> {
  const [row] = await on.select(counted).from(classes).where(and(eq(classes.studioId, studio.id), eq(classes.id, id)))
  return showClass(requireFound(row))
}

export async function openClass(studio: StudioAccess, body: z.infer<typeof classBody>): Promise<{ created: boolean, item: ClassRecord }> {
  const [id, bodyHash] = [idFor(body), bodyHashOf(body)]
  const find = async () => (await db().select().from(classes).where(and(eq(classes.studioId, studio.id), eq(classes.id, id))))[0]
  const { created } = await createOnce(bodyHash, () => db().transaction(async (tx) => {
    const [row] = await tx.insert(classes).values({ studioId: studio.id, id, name: body.name, endsAt: requireEnd(body.endsAt), roomCode: await freeRoomCode(tx), openedBy: studio.personId, bodyHash })
      .onConflictDoNothing({ target: [classes.studioId, classes.id] }).returning()
    if (row) await tell(tx, studio, row, 'opened')
    return row
  }), find)
  return { created, item: await classOf(studio, id) }
}

function requireEnd(endsAt: string): Date {
  const days = (Date.parse(endsAt) - Date.now()) / 86_400_000
  const wrong = (message: string) => new ComputeError('invalid_input', message, [{ path: 'endsAt', message }])
  if (days <= 0) throw wrong('The end lies in the past. Choose a later day.')
  if (days > limits.classMaxDays) throw wrong(`A class lasts ${limits.classMaxDays} days at most. Choose an earlier day.`)
  return new Date(endsAt)
}

async function freeRoomCode(tx: Transaction): Promise<string> {
  for (;;) {
    const code = newRoomCode()
    const [taken] = await tx.select({ id: classes.id }).from(classes).where(eq(classes.roomCode, code))
    if (!taken) return code
  }
}

/** A later end opens a class again that was over, until its students have been erased. */
export async function changeClass(studio: StudioAccess, id: string, { revision, name, endsAt, joiningOpen }: z.infer<typeof classPatch>): Promise<ClassRecord> {
  return await change(studio, id, 'changed', revision, () => ({
    name,
    endsAt: endsAt === undefined ? undefined : endsAt === 'now' ? sql`now()` : requireEnd(endsAt),
    joiningClosedAt: joiningOpen === undefined ? undefined : joiningOpen ? null : sql`now()`,
  }))
}

export const renewRoomCode = (studio: StudioAccess, id: string): Promise<ClassRecord> =>
  change(studio, id, 'code-renewed', undefined, async tx => ({ roomCode: await freeRoomCode(tx) }))

type Changes = Parameters<ReturnType<Transaction['update']>['set']>[0]

async function change(studio: StudioAccess, id: string, verb: string, revision: number | undefined, changesOf: (tx: Transaction) => Changes | Promise<Changes>): Promise<ClassRecord> {
  return await db().transaction(async (tx) => {
    const [found] = await tx.select().from(classes).where(and(eq(classes.studioId, studio.id), eq(classes.id, id))).for('update')
    const before = revision === undefined ? requireFound(found) : requireCurrent(found, revision)
    if (before.erasedAt) throw new ComputeError('wrong_state', 'This class is over and its students’ things are erased. Open a new one.')
    const [row] = await tx.update(classes).set({ ...await changesOf(tx), revision: sql`${classes.revision} + 1` })
      .where(and(eq(classes.studioId, studio.id), eq(classes.id, id))).returning()
    await tell(tx, studio, row!, verb)
    return await classOf(studio, id, tx)
  })
}

async function tell(tx: Transaction, studio: StudioAccess, row: ClassRow, verb: string): Promise<void> {
  await recordEvent(tx, { studioId: studio.id, userId: studio.personId, kind: `class.${verb}`, recordId: row.id, details: { endsAt: row.endsAt.toISOString() } })
  await hintBoard(tx, row)
  await hintStudents(tx, row)
}
