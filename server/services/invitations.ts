import { and, eq, gt, isNull, sql } from 'drizzle-orm'
import type { z } from 'zod'
import { ComputeError } from '#shared/errors'
import type { Invitation, invitationBody, Role, StudioMembership } from '#shared/schemas/people'
import { roles } from '#shared/schemas/people'
import { db, type Queryable, type Transaction } from '../db/client'
import { invitations, memberships, studios, users } from '../db/schema'
import { invitationLetter } from '../mail/letters'
import type { StudioAccess } from './access'
import { recordEvent } from './audit'
import { bodyHashOf, createOnce, idFor } from './creation'
import { hint } from './hints'
import { postLetter } from './letters'
import { publicOrigin } from './origin'
import { keyset, toPage, type Page } from './paging'
import { requireFound } from './revisions'
import { hashOfSecret, newSecret } from './secrets'

const invitationDays = 14

type InvitationRow = typeof invitations.$inferSelect

const isOpen = and(isNull(invitations.acceptedAt), isNull(invitations.revokedAt), gt(invitations.expiresAt, sql`now()`))
const show = ({ id, email, role, expiresAt, createdAt }: InvitationRow, invitedBy: string): Invitation =>
  ({ id, email, role, invitedBy, expiresAt: expiresAt.toISOString(), createdAt: createdAt.toISOString() })

export async function listInvitations(studio: StudioAccess, page: Page) {
  const { after, order, take } = keyset(invitations.id, page)
  const rows = await db().select({ id: invitations.id, row: invitations, invitedBy: users.name }).from(invitations).innerJoin(users, eq(users.id, invitations.invitedBy))
    .where(and(eq(invitations.studioId, studio.id), isOpen, after)).orderBy(order).limit(take)
  return toPage(rows, page, ({ row, invitedBy }) => show(row, invitedBy))
}

/** Writes the invitation and its letter. A second one to the same address takes the first one's place. */
export async function invite(studio: StudioAccess, inviter: { id: string, name: string }, body: z.infer<typeof invitationBody>): Promise<{ created: boolean, item: Invitation }> {
  const email = body.email.trim()
  return await db().transaction(async (tx) => {
    await requireStranger(tx, studio.id, email)
    const { secret, hash } = newSecret()
    const { created, row } = await createOnce(bodyHashOf({ ...body, email }), async () => {
      await tx.update(invitations).set({ revokedAt: sql`now()` }).where(and(eq(invitations.studioId, studio.id), eq(sql`lower(${invitations.email})`, email.toLowerCase()), isNull(invitations.acceptedAt), isNull(invitations.revokedAt), body.id ? sql`${invitations.id} <> ${body.id}` : undefined))
      const [row] = await tx.insert(invitations).values({
        studioId: studio.id, id: idFor(body), email, role: body.role, tokenHash: hash, invitedBy: inviter.id,
        expiresAt: sql`now() + make_interval(days => ${invitationDays})`, bodyHash: bodyHashOf({ ...body, email }),
      }).onConflictDoNothing({ target: [invitations.studioId, invitations.id] }).returning()
      return row
    }, async () => body.id ? (await tx.select().from(invitations).where(and(eq(invitations.studioId, studio.id), eq(invitations.id, body.id))))[0] : undefined)
    if (created) await tell(tx, studio, inviter, row, secret)
    return { created, item: show(row, inviter.name) }
  })
}

async function tell(tx: Transaction, studio: StudioAccess, inviter: { id: string, name: string }, { id, email, role }: InvitationRow, secret: string): Promise<void> {
  // After the #, so that no server's log and no referrer holds it.
  const url = `${publicOrigin()}/invitation#${secret}`
  await postLetter(tx, { kind: 'invitation', to: email, studioId: studio.id, content: invitationLetter({ studioName: studio.name, invitedBy: inviter.name, role, url, days: invitationDays }) })
  await recordEvent(tx, { studioId: studio.id, userId: inviter.id, kind: 'invitation.created', recordId: id, details: { role } })
  await hint(tx, { studioId: studio.id, topic: 'people', id })
}

async function requireStranger(on: Queryable, studioId: string, email: string): Promise<void> {
  const [known] = await on.select({ id: users.id }).from(users).innerJoin(memberships, and(eq(memberships.userId, users.id), eq(memberships.studioId, studioId))).where(eq(sql`lower(${users.email})`, email.toLowerCase()))
  if (known) throw new ComputeError('invalid_input', 'This person is in the studio already. Change their role in the list of people.', [{ path: 'email', message: 'Is in the studio already.' }])
}

export async function revokeInvitation(studio: StudioAccess, id: string): Promise<void> {
  await db().transaction(async (tx) => {
    const [row] = await tx.update(invitations).set({ revokedAt: sql`now()` })
      .where(and(eq(invitations.studioId, studio.id), eq(invitations.id, id), isNull(invitations.acceptedAt), isNull(invitations.revokedAt))).returning()
    requireFound(row)
    await recordEvent(tx, { studioId: studio.id, userId: studio.personId, kind: 'invitation.revoked', recordId: id })
    await hint(tx, { studioId: studio.id, topic: 'people', id })
  })
}

const isVoid = () => new ComputeError('link_void', 'This invitation no longer works: it was used, taken back, or is older than two weeks. Ask for a new one.')

export async function lookAtInvitation(token: string): Promise<{ studioName: string, role: Role, invitedBy: string, email: string, hasAccount: boolean }> {
  const [found] = await db().select({ studioName: studios.name, role: invitations.role, invitedBy: users.name, email: invitations.email })
    .from(invitations).innerJoin(studios, eq(studios.id, invitations.studioId)).innerJoin(users, eq(users.id, invitations.invitedBy))
    .where(and(eq(invitations.tokenHash, hashOfSecret(token)), isOpen))
  if (!found) throw isVoid()
  const [account] = await db().select({ id: users.id }).from(users).where(eq(sql`lower(${users.email})`, found.email.toLowerCase()))
  return { ...found, hasAccount: account !== undefined }
}

/** Whoever holds the letter's link may join, under whatever address they sign in with. A higher role that they have stays. */
export const joinByInvitation = (tx: Transaction, userId: string, token: string): Promise<StudioMembership> => joinByInvitationHash(tx, userId, hashOfSecret(token))

export async function joinByInvitationHash(tx: Transaction, userId: string, tokenHash: string): Promise<StudioMembership> {
  const [invitation] = await tx.update(invitations).set({ acceptedAt: sql`now()`, acceptedBy: userId }).where(and(eq(invitations.tokenHash, tokenHash), isOpen)).returning()
  if (!invitation) throw isVoid()
  const { studioId } = invitation
  const [before] = await tx.select({ role: memberships.role }).from(memberships).where(and(eq(memberships.studioId, studioId), eq(memberships.userId, userId)))
  const role = before && roles.indexOf(before.role) > roles.indexOf(invitation.role) ? before.role : invitation.role
  await tx.insert(memberships).values({ studioId, userId, role }).onConflictDoUpdate({ target: [memberships.studioId, memberships.userId], set: { role } })
  await recordEvent(tx, { studioId, userId, kind: 'person.joined', recordId: userId, details: { role, invitation: invitation.id } })
  await hint(tx, { studioId, topic: 'people', id: userId })
  const [studio] = await tx.select({ id: studios.id, slug: studios.slug, name: studios.name }).from(studios).where(eq(studios.id, studioId))
  return { ...studio!, role }
}

export const acceptInvitation = (userId: string, token: string): Promise<StudioMembership> => db().transaction(tx => joinByInvitation(tx, userId, token))
