import { and, eq, gt, isNull, lt, sql } from 'drizzle-orm'
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
  const [person] = await db().select({ id: users.id, name: users.name, email: users.email, sessionId: sessions.id, freshAt: sessions.freshAt, lastSeenAt: sessions.lastSeenAt })
    .from(sessions).innerJoin(users, eq(users.id, sessions.userId))
    .where(and(eq(sessions.id, sessionId), isNull(sessions.revokedAt), gt(sessions.expiresAt, sql`now()`)))
  if (!person) return undefined
  const { lastSeenAt, ...rest } = person
  if (Date.now() - lastSeenAt.getTime() > 60_000) await noteSeen(sessionId)
  return rest
}

/** Written once a minute at most: a session is read with every request. */
async function noteSeen(sessionId: string): Promise<void> {
  await db().update(sessions).set({ lastSeenAt: sql`now()` }).where(and(eq(sessions.id, sessionId), lt(sessions.lastSeenAt, sql`now() - interval '1 minute'`)))
}

export async function revokeSession(on: Queryable, sessionId: string): Promise<void> {
  await on.update(sessions).set({ revokedAt: sql`now()` }).where(and(eq(sessions.id, sessionId), isNull(sessions.revokedAt)))
}
