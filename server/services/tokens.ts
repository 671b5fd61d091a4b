import { and, desc, eq, gt, isNull, lt, or, sql } from 'drizzle-orm'
import { v7 as uuidv7 } from 'uuid'
import type { z } from 'zod'
import { ComputeError } from '#shared/errors'
import type { Token, tokenBody } from '#shared/schemas/account'
import { db } from '../db/client'
import { tokens, users } from '../db/schema'
import { accessTo, type Person } from './access'
import { recordEvent } from './audit'
import { requireFound } from './revisions'
import { hashOfSecret, newSecret } from './secrets'

const tokenPrefix = 'emu_'
const shownCharacters = 10

const isLive = and(isNull(tokens.revokedAt), or(isNull(tokens.expiresAt), gt(tokens.expiresAt, sql`now()`)))

/** Who a bearer token speaks for; undefined once it is revoked or has run out. */
export async function personOfToken(token: string): Promise<Person | undefined> {
  if (!token.startsWith(tokenPrefix)) return undefined
  const [row] = await db().select({ id: users.id, name: users.name, email: users.email, tokenId: tokens.id, studioId: tokens.studioId, roleCeiling: tokens.roleCeiling, lastUsedAt: tokens.lastUsedAt })
    .from(tokens).innerJoin(users, eq(users.id, tokens.userId)).where(and(eq(tokens.tokenHash, hashOfSecret(token)), isLive))
  if (!row) return undefined
  const { tokenId, studioId, roleCeiling, lastUsedAt, ...person } = row
  if (!lastUsedAt || Date.now() - lastUsedAt.getTime() > 60_000) await noteUsed(tokenId)
  return { ...person, token: { studioId, roleCeiling } }
}

/** Written once a minute at most. */
async function noteUsed(id: string): Promise<void> {
  await db().update(tokens).set({ lastUsedAt: sql`now()` }).where(and(eq(tokens.id, id), or(isNull(tokens.lastUsedAt), lt(tokens.lastUsedAt, sql`now() - interval '1 minute'`))))
}

export async function listTokens(userId: string): Promise<Token[]> {
  const rows = await db().select().from(tokens).where(and(eq(tokens.userId, userId), isLive)).orderBy(desc(tokens.id))
  return rows.map(({ id, name, starts, studioId, roleCeiling, expiresAt, lastUsedAt, createdAt }) =>
    ({ id, name, starts, studioId, roleCeiling, expiresAt: expiresAt?.toISOString() ?? null, lastUsedAt: lastUsedAt?.toISOString() ?? null, createdAt: createdAt.toISOString() }))
}

/** The token itself is in this answer and nowhere else. */
export async function createToken(userId: string, { name, expiresAt, studioId, roleCeiling }: z.infer<typeof tokenBody>): Promise<{ id: string, token: string }> {
  if (expiresAt && Date.parse(expiresAt) <= Date.now()) throw new ComputeError('invalid_input', 'This token would have run out already.', [{ path: 'expiresAt', message: 'Lies in the past.' }])
  if (studioId && !await accessTo(userId, studioId)) throw new ComputeError('invalid_input', 'You are not in that studio.', [{ path: 'studioId', message: 'There is no such studio, or you are not in it.' }])
  const { secret, hash } = newSecret(tokenPrefix)
  const id = uuidv7()
  await db().transaction(async (tx) => {
    await tx.insert(tokens).values({ id, userId, name, tokenHash: hash, starts: secret.slice(0, shownCharacters), studioId, roleCeiling, expiresAt: expiresAt ? new Date(expiresAt) : undefined })
    await recordEvent(tx, { userId, studioId, kind: 'token.created', recordId: id, details: { roleCeiling } })
  })
  return { id, token: secret }
}

export async function revokeToken(userId: string, id: string): Promise<void> {
  await db().transaction(async (tx) => {
    const [row] = await tx.update(tokens).set({ revokedAt: sql`now()` }).where(and(eq(tokens.id, id), eq(tokens.userId, userId), isNull(tokens.revokedAt))).returning()
    requireFound(row)
    await recordEvent(tx, { userId, studioId: row!.studioId ?? undefined, kind: 'token.revoked', recordId: id })
  })
}
