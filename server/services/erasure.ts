import { and, eq, lte, or, sql } from 'drizzle-orm'
import { ComputeError } from '#shared/errors'
import { retentionDays } from '#shared/schemas/retention'
import { readSettings } from '../config'
import { db, type Queryable, type Transaction } from '../db/client'
import * as tables from '../db/schema'
import { accountErasureLetter, studioErasureLetter } from '../mail/letters'
import { studioFolders, storageKeys } from '../storage'
import type { StudioAccess } from './access'
import { recordEvent } from './audit'
import { hint } from './hints'
import { postLetter } from './letters'
import { publicOrigin } from './origin'
import { storage } from './storage'
import { removeUpload } from './uploads'

const { users, studios, memberships, photos, negatives, renders, sessions, tokens, letterLinks, letters, invitations, uploads } = tables

/** Every table that belongs to a studio, those that refer to others first. A test holds it against the database. */
export const studioTables = [
  tables.uploads, tables.renders, tables.negatives, tables.walkStepRows, tables.filmDensities, tables.tablets, tables.curveReadings, tables.readings,
  tables.wedgePrints, tables.wedges, tables.curves, tables.baseExposures, tables.benches, tables.scannerProfiles,
  tables.papers, tables.sensitizers, tables.films, tables.inkjets, tables.lamps, tables.scanners, tables.photos,
  tables.classStudents, tables.classes, tables.invitations, tables.tokens, tables.letters, tables.memberships,
] as const

const dueDate = () => sql`now() + make_interval(secs => ${86_400 * readSettings().ERASURE_GRACE_DAYS})`
const dayOf = (instant: Date) => new Intl.DateTimeFormat('en', { dateStyle: 'long', timeZone: 'UTC' }).format(instant)

/** Puts the erasure off by the time of grace and tells everybody in the studio. The name is typed as a check. */
export async function askStudioErasure(studio: StudioAccess, byName: string, typedName: string): Promise<Date> {
  if (typedName.trim() !== studio.name) throw new ComputeError('invalid_input', 'Type the studio’s name as it stands, so that nobody erases the wrong one.', [{ path: 'name', message: `The studio is called “${studio.name}”.` }])
  return await db().transaction(async (tx) => {
    const [row] = await tx.update(studios).set({ eraseAfter: dueDate() }).where(eq(studios.id, studio.id)).returning()
    const content = studioErasureLetter({ studioName: studio.name, on: dayOf(row!.eraseAfter!), by: byName })
    const people = await tx.select({ id: users.id, email: users.email }).from(memberships).innerJoin(users, eq(users.id, memberships.userId)).where(eq(memberships.studioId, studio.id))
    for (const { id, email } of people) await postLetter(tx, { kind: 'studio-notice', to: email, userId: id, studioId: studio.id, content })
    await recordEvent(tx, { studioId: studio.id, userId: studio.personId, kind: 'studio.erasure-asked', recordId: studio.id })
    return row!.eraseAfter!
  })
}

export async function keepStudio(studio: StudioAccess): Promise<void> {
  await db().transaction(async (tx) => {
    await tx.update(studios).set({ eraseAfter: null }).where(eq(studios.id, studio.id))
    await recordEvent(tx, { studioId: studio.id, userId: studio.personId, kind: 'studio.kept', recordId: studio.id })
  })
}

export async function askAccountErasure(person: { id: string, email: string | null }): Promise<Date> {
  return await db().transaction(async (tx) => {
    await requireNoOneLeftBehind(tx, person.id)
    const [row] = await tx.update(users).set({ eraseAfter: dueDate() }).where(eq(users.id, person.id)).returning()
    await postLetter(tx, { kind: 'account-notice', to: person.email, userId: person.id, content: accountErasureLetter({ on: dayOf(row!.eraseAfter!), url: `${publicOrigin()}/account` }) })
    await recordEvent(tx, { userId: person.id, kind: 'person.erasure-asked', recordId: person.id })
    return row!.eraseAfter!
  })
}

export async function erasureOf(userId: string): Promise<{ eraseAfter: string | null, graceDays: number }> {
  const [row] = await db().select({ eraseAfter: users.eraseAfter }).from(users).where(eq(users.id, userId))
  return { eraseAfter: row!.eraseAfter?.toISOString() ?? null, graceDays: readSettings().ERASURE_GRACE_DAYS }
}

export async function keepAccount(userId: string): Promise<void> {
  await db().transaction(async (tx) => {
    await tx.update(users).set({ eraseAfter: null }).where(eq(users.id, userId))
    await recordEvent(tx, { userId, kind: 'person.kept', recordId: userId })
  })
}

/** A studio with other people in it must keep an owner. */
async function requireNoOneLeftBehind(tx: Transaction, userId: string): Promise<void> {
  for (const { id, name } of await studiosRunAlone(tx, userId)) {
    const [{ count } = { count: 0 }] = await tx.select({ count: sql<number>`count(*)::int` }).from(memberships).where(eq(memberships.studioId, id))
    if (count > 1) throw new ComputeError('last_owner', `You are the last owner of ${name}, and others work there. Make somebody else an owner first, or erase the studio.`)
  }
}

async function studiosRunAlone(on: Queryable, userId: string): Promise<{ id: string, name: string }[]> {
  return await on.select({ id: studios.id, name: studios.name }).from(memberships).innerJoin(studios, eq(studios.id, memberships.studioId))
    .where(and(eq(memberships.userId, userId), eq(memberships.role, 'owner'),
      sql`not exists (select 1 from memberships other where other.studio_id = ${studios.id} and other.role = 'owner' and other.user_id <> ${userId})`))
}

/** Erases what was asked for and whose time has come; tells what it erased. Broken off, it goes on where it was. */
export async function eraseWhatIsDue(): Promise<{ kind: 'studio' | 'account', id: string }[]> {
  const dueStudios = await db().select({ id: studios.id }).from(studios).where(lte(studios.eraseAfter, sql`now()`))
  for (const { id } of dueStudios) await eraseStudio(id)
  const dueUsers = await db().select({ id: users.id }).from(users).where(lte(users.eraseAfter, sql`now()`))
  for (const { id } of dueUsers) await eraseAccount(id)
  return [...dueStudios.map(({ id }) => ({ kind: 'studio' as const, id })), ...dueUsers.map(({ id }) => ({ kind: 'account' as const, id }))]
}

/** Files first: while a row is there, a broken-off erasure is taken up again. */
export async function eraseStudio(studioId: string): Promise<void> {
  for (const folder of studioFolders(studioId)) await storage().removeFolder(folder)
  await db().transaction(async (tx) => {
    for (const table of studioTables) await tx.delete(table).where(eq(table.studioId, studioId))
    await tx.delete(studios).where(eq(studios.id, studioId))
    await recordEvent(tx, { studioId, kind: 'studio.erased', recordId: studioId })
  })
}

/** What is the person's own goes; what they did for a studio stays, under no name. */
export async function eraseAccount(userId: string): Promise<void> {
  for (const { id } of await studiosRunAlone(db(), userId)) await eraseStudio(id)
  const underWay = await db().select({ studioId: uploads.studioId, id: uploads.id }).from(uploads).where(eq(uploads.personId, userId))
  for (const upload of underWay) await removeUpload(upload)
  const own = await db().select({ studioId: photos.studioId, id: photos.id }).from(photos).where(eq(photos.uploaderId, userId))
  for (const { studioId, id } of own) await db().transaction(tx => erasePhoto(tx, studioId, id))
  await db().transaction(async (tx) => {
    await tx.delete(negatives).where(eq(negatives.createdBy, userId))
    for (const table of [tables.passkeys, tables.passkeyChallenges, tables.identities, sessions, tokens, letterLinks, letters, memberships]) await tx.delete(table).where(eq(table.userId, userId))
    await tx.delete(tables.classStudents).where(eq(tables.classStudents.id, userId))
    await tx.delete(invitations).where(or(eq(invitations.invitedBy, userId), eq(invitations.acceptedBy, userId)))
    await tx.update(users).set({ name: 'Erased account', email: `${userId}@erased.invalid`, passwordHash: null, eraseAfter: null, lettersOff: [] }).where(eq(users.id, userId))
    await recordEvent(tx, { userId, kind: 'person.erased', recordId: userId })
  })
}

/** Erases photos that have lain in the bin for their time, with their files and with what was made of them; tells which. */
export async function eraseBinnedPhotos(days: number = retentionDays.binnedPhoto): Promise<string[]> {
  const isDue = lte(photos.binnedAt, sql`now() - make_interval(secs => ${86_400 * days})`)
  const due = await db().select({ studioId: photos.studioId, id: photos.id }).from(photos).where(isDue)
  const erased: string[] = []
  for (const { studioId, id } of due) {
    await db().transaction(async (tx) => {
      // Locked and looked at again: it may have been taken out of the bin meanwhile.
      const [row] = await tx.select({ uploaderId: photos.uploaderId }).from(photos).where(and(eq(photos.studioId, studioId), eq(photos.id, id), isDue)).for('update')
      if (!row) return
      await erasePhoto(tx, studioId, id)
      await recordEvent(tx, { studioId, kind: 'photo.erased', recordId: id })
      await hint(tx, { studioId, topic: 'photos', id, onlyFor: row.uploaderId })
      erased.push(id)
    })
  }
  return erased
}

/** Files before rows: an erasure that is broken off is taken up again while its row is there. */
async function erasePhoto(tx: Transaction, studioId: string, photoId: string): Promise<void> {
  const films = await tx.select().from(renders).where(and(eq(renders.studioId, studioId), eq(renders.photoId, photoId)))
  for (const film of films) await storage().remove(storageKeys.film(studioId, film.renderKey, film.format))
  await storage().removeFolder(storageKeys.pictureFolder(studioId, photoId))
  await storage().remove(storageKeys.original(studioId, photoId))
  for (const table of [renders, negatives, uploads]) await tx.delete(table).where(and(eq(table.studioId, studioId), eq(table.photoId, photoId)))
  await tx.delete(photos).where(and(eq(photos.studioId, studioId), eq(photos.id, photoId)))
}
