import { randomBytes } from 'node:crypto'
import { and, asc, eq, inArray, isNull, ne, or, sql } from 'drizzle-orm'
import { v7 as uuidv7 } from 'uuid'
import type { z } from 'zod'
import { ComputeError } from '#shared/errors'
import type { loginBody, registerBody, Role, StudioDetails, StudioMembership, User } from '#shared/schemas/people'
import { readSettings } from '../config'
import { db, type Queryable, type Transaction } from '../db/client'
import { classes, classStudents, memberships, studios, users } from '../db/schema'
import { roleChangedLetter } from '../mail/letters'
import { requireRole, type StudioAccess } from './access'
import { recordEvent } from './audit'
import { isPast, isStudent, showOwnClass } from './class-times'
import { hint } from './hints'
import { joinByInvitationHash } from './invitations'
import { postLetter } from './letters'
import { hashPassword, passwordMatches } from './passwords'
import { requireCurrent, requireFound } from './revisions'
import { hashOfSecret } from './secrets'
import { openSession, revokeSession, revokeSessionsOf } from './sessions'

export interface SignedIn { sessionId: string, user: User }

/** Makes a person and a session: in a studio of their own, or in the one that an invitation names. */
export async function register({ invitationToken, ...body }: z.infer<typeof registerBody>): Promise<SignedIn & { studio: StudioMembership }> {
  const invitationHash = invitationToken && hashOfSecret(invitationToken)
  requireOpenFor(invitationHash)
  const passwordHash = await hashPassword(body.password)
  return await db().transaction(async (tx) => {
    const { user, studio } = await addPerson(tx, { ...body, passwordHash, invitationHash })
    return { user, studio, sessionId: await openSession(tx, user.id) }
  })
}

/** A new person, in a studio of their own or in the one that an invitation names. Without a password there is another way in. */
export async function addPerson(tx: Transaction, { name, email, passwordHash, studioName, invitationHash }: { name: string, email: string, passwordHash: string | null, studioName?: string, invitationHash?: string }): Promise<{ user: User, studio: StudioMembership }> {
  requireOpenFor(invitationHash)
  const [user] = await tx.insert(users).values({ id: uuidv7(), name, email, passwordHash })
    .onConflictDoNothing().returning({ id: users.id, name: users.name, email: users.email })
  if (!user) throw new ComputeError('email_taken', 'Somebody has signed up with this e-mail address already. Sign in instead.')
  await recordEvent(tx, { userId: user.id, kind: 'person.registered', recordId: user.id })
  return { user, studio: invitationHash ? await joinByInvitationHash(tx, user.id, invitationHash) : await openStudio(tx, user.id, studioName ?? `${name.slice(0, 100)}’s studio`) }
}

function requireOpenFor(invitationHash: string | undefined): void {
  if (readSettings().REGISTRATION === 'invite' && !invitationHash) throw new ComputeError('registration_closed', 'This installation is open by invitation only. Ask an owner of a studio to invite you.')
}

export async function signIn({ email, password }: z.infer<typeof loginBody>): Promise<SignedIn> {
  const [found] = await db().select().from(users).where(eq(sql`lower(${users.email})`, email.trim().toLowerCase()))
  if (!await passwordMatches(found?.passwordHash, password)) {
    throw new ComputeError('wrong_credentials', 'E-mail address and password don’t belong together. Check both and try again.')
  }
  return await db().transaction(tx => signInAs(tx, found!))
}

/** A session for somebody who has shown who they are. */
export async function signInAs(tx: Transaction, { id, name, email }: User): Promise<SignedIn> {
  await recordEvent(tx, { userId: id, kind: 'session.opened' })
  return { user: { id, name, email }, sessionId: await openSession(tx, id) }
}

export async function signOut(userId: string, sessionId: string): Promise<void> {
  await db().transaction(async (tx) => {
    await revokeSession(tx, sessionId)
    await recordEvent(tx, { userId, kind: 'session.closed' })
  })
}

export async function signOutEverywhere(userId: string): Promise<void> {
  await db().transaction(async (tx) => {
    await revokeSessionsOf(tx, userId)
    await recordEvent(tx, { userId, kind: 'session.all-closed' })
  })
}

/** The studio that a person last put a photo into, else the one they joined first. */
export async function lastUsedStudio(userId: string): Promise<string | undefined> {
  const [row] = await db().select({ id: memberships.studioId }).from(memberships).where(eq(memberships.userId, userId))
    .orderBy(sql`(select max(created_at) from photos where photos.studio_id = ${memberships.studioId} and photos.uploader_id = ${userId}) desc nulls last`, asc(memberships.createdAt)).limit(1)
  return row?.id
}

export async function studiosOf(userId: string): Promise<StudioMembership[]> {
  const rows = await db().select({ id: studios.id, slug: studios.slug, name: studios.name, role: memberships.role, isDemo: studios.isDemo, class: { id: classes.id, name: classes.name, endsAt: classes.endsAt } })
    .from(memberships).innerJoin(studios, eq(studios.id, memberships.studioId))
    .leftJoin(classStudents, and(eq(classStudents.studioId, studios.id), eq(classStudents.id, userId), isStudent))
    .leftJoin(classes, and(eq(classes.studioId, classStudents.studioId), eq(classes.id, classStudents.classId)))
    .where(and(eq(memberships.userId, userId), or(isNull(classes.id), sql`not ${isPast()}`))).orderBy(asc(memberships.createdAt), asc(studios.id))
  return rows.map(({ class: ownClass, isDemo, ...studio }) => ({
    ...studio, ...ownClass ? { class: showOwnClass(ownClass) } : {}, ...isDemo && studio.role === 'owner' ? { isDemo } : {},
  }))
}

/** Students stand on their class's board, and are not told of one another: they see who teaches, and themselves. */
export async function peopleOf({ id: studioId, personId, student }: StudioAccess): Promise<{ id: string, name: string, role: Role }[]> {
  const isNoStudent = sql`not exists (select 1 from class_students where class_students.id = ${users.id} and class_students.studio_id = ${studioId} and ${isStudent})`
  return await db().select({ id: users.id, name: users.name, role: memberships.role })
    .from(memberships).innerJoin(users, eq(users.id, memberships.userId))
    .where(and(eq(memberships.studioId, studioId), student ? or(inArray(memberships.role, ['technician', 'owner']), eq(users.id, personId)) : isNoStudent)).orderBy(asc(users.name), asc(users.id))
}

/** Opens a studio with this person as its owner. */
export async function openStudio(tx: Transaction, ownerId: string, name: string, isDemo = false): Promise<StudioMembership> {
  const studio = await insertStudio(tx, name, isDemo)
  await tx.insert(memberships).values({ studioId: studio.id, userId: ownerId, role: 'owner' })
  await recordEvent(tx, { studioId: studio.id, userId: ownerId, kind: 'studio.opened', recordId: studio.id })
  return { ...studio, role: 'owner' }
}

async function insertStudio(on: Queryable, name: string, isDemo: boolean): Promise<{ id: string, slug: string, name: string }> {
  const base = slugOf(name)
  for (const slug of [base, `${base}-2`, `${base}-3`, `${base}-${randomBytes(4).toString('hex')}`]) {
    const [studio] = await on.insert(studios).values({ id: uuidv7(), slug, name, isDemo, maxBytes: readSettings().STUDIO_MAX_BYTES })
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

export async function studioDetailsOf(studio: StudioAccess): Promise<StudioDetails> {
  const [row] = await db().select({
    name: studios.name, createdAt: studios.createdAt, revision: studios.revision, eraseAfter: studios.eraseAfter, maxBytes: studios.maxBytes,
    // Written out: drizzle leaves the outer table's name away where it selects from one table.
    bytes: sql<string>`(select coalesce(sum(bytes), 0) from photos where photos.studio_id = studios.id)`,
  }).from(studios).where(eq(studios.id, studio.id))
  const { createdAt, eraseAfter, bytes, maxBytes, ...details } = row!
  return {
    id: studio.id, slug: studio.slug, role: studio.role, ...details, createdAt: createdAt.toISOString(),
    usage: { bytes: Number(bytes), maxBytes },
    eraseAfter: eraseAfter?.toISOString() ?? null, erasureGraceDays: readSettings().ERASURE_GRACE_DAYS,
  }
}

/** Its address stays: links and codes that are out in the world go on working. */
export async function renameStudio(studio: StudioAccess, name: string, revision: number): Promise<StudioDetails> {
  await db().transaction(async (tx) => {
    const [row] = await tx.select({ revision: studios.revision }).from(studios).where(eq(studios.id, studio.id)).for('update')
    requireCurrent(row, revision)
    await tx.update(studios).set({ name, revision: revision + 1 }).where(eq(studios.id, studio.id))
    await recordEvent(tx, { studioId: studio.id, userId: studio.personId, kind: 'studio.renamed', recordId: studio.id })
  })
  return await studioDetailsOf(studio)
}

/** The last owner stays one: a studio without an owner could not be run, or erased. */
export async function changeRole(studio: StudioAccess, personId: string, role: Role): Promise<{ id: string, name: string, role: Role }> {
  return await db().transaction(async (tx) => {
    const before = await lockMember(tx, studio.id, personId)
    if (before.role === 'owner' && role !== 'owner') await requireOtherOwner(tx, studio.id, personId)
    if (before.role !== role) {
      await tx.update(memberships).set({ role }).where(and(eq(memberships.studioId, studio.id), eq(memberships.userId, personId)))
      await recordEvent(tx, { studioId: studio.id, userId: studio.personId, kind: 'person.role-changed', recordId: personId, details: { from: before.role, to: role } })
      await hint(tx, { studioId: studio.id, topic: 'people', id: personId })
      await postLetter(tx, { kind: 'studio-notice', to: before.email, userId: personId, studioId: studio.id, content: roleChangedLetter({ studioName: studio.name, role }) })
    }
    return { id: personId, name: before.name, role }
  })
}

/** Owners take others out; everybody may leave. Their photos and negatives stay theirs, and out of sight until they are back. */
export async function removePerson(studio: StudioAccess, personId: string): Promise<void> {
  if (personId !== studio.personId) requireRole(studio, 'owner')
  await db().transaction(async (tx) => {
    const { role } = await lockMember(tx, studio.id, personId)
    if (role === 'owner') await requireOtherOwner(tx, studio.id, personId)
    await tx.delete(memberships).where(and(eq(memberships.studioId, studio.id), eq(memberships.userId, personId)))
    await recordEvent(tx, { studioId: studio.id, userId: studio.personId, kind: 'person.left', recordId: personId, details: { role } })
    await hint(tx, { studioId: studio.id, topic: 'people', id: personId })
  })
}

/** Changes of a studio's people wait for one another at its row. */
async function lockMember(tx: Transaction, studioId: string, personId: string): Promise<{ name: string, email: string | null, role: Role }> {
  await tx.select({ id: studios.id }).from(studios).where(eq(studios.id, studioId)).for('no key update')
  const [member] = await tx.select({ name: users.name, email: users.email, role: memberships.role }).from(memberships)
    .innerJoin(users, eq(users.id, memberships.userId)).where(and(eq(memberships.studioId, studioId), eq(memberships.userId, personId)))
  const [student] = await tx.select({ id: classStudents.id }).from(classStudents).where(and(eq(classStudents.studioId, studioId), eq(classStudents.id, personId), isStudent))
  if (student) throw new ComputeError('wrong_state', 'Students of a class are looked after on its board, until they have an account of their own.')
  return requireFound(member)
}

async function requireOtherOwner(tx: Transaction, studioId: string, personId: string): Promise<void> {
  const [other] = await tx.select({ id: memberships.userId }).from(memberships)
    .where(and(eq(memberships.studioId, studioId), eq(memberships.role, 'owner'), ne(memberships.userId, personId))).limit(1)
  if (!other) throw new ComputeError('last_owner', 'This is the studio’s last owner. Make somebody else an owner first, or erase the studio.')
}
