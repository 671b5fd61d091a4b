import { and, desc, eq, gt, isNull, lt, ne, sql } from 'drizzle-orm'
import type { Session } from '#shared/schemas/account'
import { db, type Queryable } from '../db/client'
import { sessions, users } from '../db/schema'
import type { Person } from './access'

export const sessionDays = 30

export async function openSession(on: Queryable, userId: string): Promise<string> {
  const id = crypto.randomUUID()
  await on.insert(sessions).values({ id, userId, freshAt: sql`now()`, lastSeenAt: sql`now()`, expiresAt: sql`now() + make_interval(days => ${sessionDays})` })
  return id
}

/** Who holds a live session; undefined once it is revoked or has run out. */
export async function personOfSession(sessionId: string): Promise<Person | undefined> {
  const [person] = await db().select({ id: users.id, name: users.name, email: users.email, freshAt: sessions.freshAt, lastSeenAt: sessions.lastSeenAt })
    .from(sessions).innerJoin(users, eq(users.id, sessions.userId))
    .where(and(eq(sessions.id, sessionId), isNull(sessions.revokedAt), gt(sessions.expiresAt, sql`now()`)))
  if (!person) return undefined
  const { lastSeenAt, freshAt, ...rest } = person
  if (Date.now() - lastSeenAt.getTime() > 60_000) await noteSeen(sessionId)
  return { ...rest, session: { id: sessionId, freshAt } }
}

/** Written once a minute at most: a session is read with every request. */
async function noteSeen(sessionId: string): Promise<void> {
  await db().update(sessions).set({ lastSeenAt: sql`now()` }).where(and(eq(sessions.id, sessionId), lt(sessions.lastSeenAt, sql`now() - interval '1 minute'`)))
}

/** All of a person's, or all but one. */
export async function revokeSessionsOf(on: Queryable, userId: string, exceptId?: string): Promise<void> {
  await on.update(sessions).set({ revokedAt: sql`now()` }).where(and(eq(sessions.userId, userId), isNull(sessions.revokedAt), exceptId ? ne(sessions.id, exceptId) : undefined))
}

/** The person has just proved who they are. */
export async function freshenSession(on: Queryable, sessionId: string): Promise<void> {
  await on.update(sessions).set({ freshAt: sql`now()` }).where(eq(sessions.id, sessionId))
}

export async function sessionsOf(userId: string, thisId: string): Promise<Session[]> {
  const rows = await db().select({ id: sessions.id, createdAt: sessions.createdAt, lastSeenAt: sessions.lastSeenAt }).from(sessions)
    .where(and(eq(sessions.userId, userId), isNull(sessions.revokedAt), gt(sessions.expiresAt, sql`now()`))).orderBy(desc(sessions.lastSeenAt))
  return rows.map(row => ({ id: row.id, isThis: row.id === thisId, createdAt: row.createdAt.toISOString(), lastSeenAt: row.lastSeenAt.toISOString() }))
}

export async function revokeSession(on: Queryable, sessionId: string): Promise<void> {
  await on.update(sessions).set({ revokedAt: sql`now()` }).where(and(eq(sessions.id, sessionId), isNull(sessions.revokedAt)))
}
