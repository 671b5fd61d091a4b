import { and, eq, inArray, isNull, like, or, sql } from 'drizzle-orm'
import { ComputeError } from '#shared/errors'
import { db, type Transaction } from '../db/client'
import { classStudents, memberships, studios, users } from '../db/schema'
import type { StudioAccess } from './access'
import { recordEvent } from './audit'
import { eraseAccount, eraseStudio } from './erasure'

/** Addresses of the demo's people end with this; the domain is reserved (RFC 2606), so that nobody has one of their own there. */
export const inventedDomain = '@ropeworks.example'

/**
 * Removes the demo studio with everything in it and its invented people, at once. Real people who were invited into it, and
 * invented ones who are in another studio by now, keep their accounts. Broken off, the worker's sweep goes on: all is due.
 */
export async function removeDemo(studio: Pick<StudioAccess, 'id'> & { personId?: string }): Promise<void> {
  const people = await db().transaction(async (tx) => {
    const [row] = await tx.update(studios).set({ eraseAfter: sql`now()` }).where(and(eq(studios.id, studio.id), studios.isDemo)).returning({ id: studios.id })
    if (!row) throw new ComputeError('wrong_state', 'This is no demo studio. An owner can erase it on the Studio page; it is gone two weeks later.')
    const ids = await inventedPeopleOf(tx, studio.id)
    await tx.update(users).set({ eraseAfter: sql`now()` }).where(inArray(users.id, ids))
    await recordEvent(tx, { studioId: studio.id, userId: studio.personId, kind: 'studio.demo-removed', recordId: studio.id })
    return ids
  })
  await eraseStudio(studio.id)
  for (const id of people) {
    await eraseAccount(id)
    await forget(id)
  }
}

async function inventedPeopleOf(tx: Transaction, studioId: string): Promise<string[]> {
  const isHere = sql`(exists (select 1 from ${memberships} m where m.user_id = ${users.id} and m.studio_id = ${studioId}) or exists (select 1 from ${classStudents} s where s.id = ${users.id} and s.studio_id = ${studioId}))`
  const isElsewhere = sql`exists (select 1 from ${memberships} m where m.user_id = ${users.id} and m.studio_id <> ${studioId})`
  const rows = await tx.select({ id: users.id }).from(users).where(and(isHere, sql`not ${isElsewhere}`, or(isNull(users.email), like(users.email, `%${inventedDomain}`))))
  return rows.map(row => row.id)
}

const foreignKeyViolation = '23503'

/** Not even the row of an erased account stays, unless another studio keeps something that this person did there. */
async function forget(userId: string): Promise<void> {
  try {
    await db().delete(users).where(eq(users.id, userId))
  }
  catch (error) {
    if ((error as { cause?: { code?: string } }).cause?.code !== foreignKeyViolation) throw error
  }
}
