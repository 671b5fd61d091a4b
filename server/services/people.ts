import { randomBytes } from 'node:crypto'
import { asc, eq, sql } from 'drizzle-orm'
import { v7 as uuidv7 } from 'uuid'
import type { z } from 'zod'
import { ComputeError } from '#shared/errors'
import type { loginBody, registerBody, Role, StudioMembership, User } from '#shared/schemas/people'
import { readSettings } from '../config'
import { db, type Queryable, type Transaction } from '../db/client'
import { memberships, studios, users } from '../db/schema'
import { recordEvent } from './audit'
import { hashPassword, passwordMatches } from './passwords'
import { openSession, revokeSession } from './sessions'

export interface SignedIn { sessionId: string, user: User }

/** Makes a person, a studio of their own and a session. */
export async function register(body: z.infer<typeof registerBody>): Promise<SignedIn & { studio: StudioMembership }> {
  if (readSettings().REGISTRATION === 'invite') throw new ComputeError('registration_closed', 'This installation is open by invitation only. Ask an owner of a studio to invite you.')
  const passwordHash = await hashPassword(body.password)
  return await db().transaction(async (tx) => {
    const [user] = await tx.insert(users).values({ id: uuidv7(), name: body.name, email: body.email, passwordHash })
      .onConflictDoNothing().returning({ id: users.id, name: users.name, email: users.email })
    if (!user) throw new ComputeError('email_taken', 'Somebody has signed up with this e-mail address already. Sign in instead.')
    await recordEvent(tx, { userId: user.id, kind: 'person.registered', recordId: user.id })
    const studio = await openStudio(tx, user.id, body.studioName ?? `${body.name.slice(0, 100)}’s studio`)
    return { user, studio, sessionId: await openSession(tx, user.id) }
  })
}

export async function signIn({ email, password }: z.infer<typeof loginBody>): Promise<SignedIn> {
  const [found] = await db().select().from(users).where(eq(sql`lower(${users.email})`, email.trim().toLowerCase()))
  if (!await passwordMatches(found?.passwordHash, password)) {
    throw new ComputeError('wrong_credentials', 'E-mail address and password don’t belong together. Check both and try again.')
  }
  const { id, name, email: stored } = found!
  return await db().transaction(async (tx) => {
    await recordEvent(tx, { userId: id, kind: 'session.opened' })
    return { user: { id, name, email: stored }, sessionId: await openSession(tx, id) }
  })
}

export async function signOut(userId: string, sessionId: string): Promise<void> {
  await db().transaction(async (tx) => {
    await revokeSession(tx, sessionId)
    await recordEvent(tx, { userId, kind: 'session.closed' })
  })
}

export async function studiosOf(userId: string): Promise<StudioMembership[]> {
  return await db().select({ id: studios.id, slug: studios.slug, name: studios.name, role: memberships.role })
    .from(memberships).innerJoin(studios, eq(studios.id, memberships.studioId)).where(eq(memberships.userId, userId)).orderBy(asc(memberships.createdAt), asc(studios.id))
}

export async function peopleOf(studioId: string): Promise<{ id: string, name: string, role: Role }[]> {
  return await db().select({ id: users.id, name: users.name, role: memberships.role })
    .from(memberships).innerJoin(users, eq(users.id, memberships.userId)).where(eq(memberships.studioId, studioId)).orderBy(asc(users.name), asc(users.id))
}

/** Opens a studio with this person as its owner. */
export async function openStudio(tx: Transaction, ownerId: string, name: string): Promise<StudioMembership> {
  const studio = await insertStudio(tx, name)
  await tx.insert(memberships).values({ studioId: studio.id, userId: ownerId, role: 'owner' })
  await recordEvent(tx, { studioId: studio.id, userId: ownerId, kind: 'studio.opened', recordId: studio.id })
  return { ...studio, role: 'owner' }
}

async function insertStudio(on: Queryable, name: string): Promise<{ id: string, slug: string, name: string }> {
  const base = slugOf(name)
  for (const slug of [base, `${base}-2`, `${base}-3`, `${base}-${randomBytes(4).toString('hex')}`]) {
    const [studio] = await on.insert(studios).values({ id: uuidv7(), slug, name, maxBytes: readSettings().STUDIO_MAX_BYTES })
      .onConflictDoNothing({ target: studios.slug }).returning({ id: studios.id, slug: studios.slug, name: studios.name })
    if (studio) return studio
  }
  throw new ComputeError('unavailable', 'No free address was found for this studio. Try again, or give it another name.')
}

/** The studio's name as it stands in addresses: lower-case Latin letters, digits and hyphens. */
export function slugOf(name: string): string {
  const slug = name.normalize('NFKD').replace(/[\u0300-\u036F’']/g, '').toLowerCase().replace(/[^a-z0-9]+/g, '-').slice(0, 50).replace(/^-+|-+$/g, '')
  return slug || 'studio'
}

/** How many bytes the studio's originals take up. */
export async function studioDetails(studioId: string): Promise<{ createdAt: string, usage: { bytes: number, maxBytes: number } }> {
  const [row] = await db().select({
    createdAt: studios.createdAt, maxBytes: studios.maxBytes,
    bytes: sql<string>`(select coalesce(sum(bytes), 0) from photos where photos.studio_id = ${studios.id})`,
  }).from(studios).where(eq(studios.id, studioId))
  return { createdAt: row!.createdAt.toISOString(), usage: { bytes: Number(row!.bytes), maxBytes: row!.maxBytes } }
}
