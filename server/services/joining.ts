import { and, eq, gt, isNull, sql } from 'drizzle-orm'
import { v7 as uuidv7 } from 'uuid'
import { freeFirstName } from '#shared/classes/first-names'
import { ComputeError } from '#shared/errors'
import { limits } from '#shared/schemas/limits'
import type { StudioMembership } from '#shared/schemas/people'
import { db, type Queryable, type Transaction } from '../db/client'
import { classes, classStudents, memberships, studios, users } from '../db/schema'
import { recordEvent } from './audit'
import { hashOfPersonalCode, newPersonalCode } from './class-codes'
import { hintBoard } from './class-hints'
import { isPast, isStudent, showOwnClass } from './class-times'
import { signInAs, type SignedIn } from './people'
import { openSession } from './sessions'

/** How students come into a class and back into it: by codes, with nothing but a first name. */

const opensNothing = () => new ComputeError('link_void', 'This room code opens no class. Compare it with the board, or ask your teacher whether joining is still open.')

/** The class that a room code opens now. Codes of classes that are closed or over say no more than wrong ones. */
async function classBehind(on: Queryable, roomCode: string) {
  const [found] = await on.select({ row: classes, studio: { id: studios.id, slug: studios.slug, name: studios.name } }).from(classes).innerJoin(studios, eq(studios.id, classes.studioId))
    .where(and(eq(classes.roomCode, roomCode), isNull(classes.joiningClosedAt), gt(classes.endsAt, sql`now()`)))
  if (!found) throw opensNothing()
  return found
}

export async function lookAtClass(roomCode: string) {
  const { row, studio } = await classBehind(db(), roomCode)
  const { name, endsAt, takeAlongUntil } = showOwnClass(row)
  return { className: name, studioName: studio.name, endsAt, takeAlongUntil }
}

/** Makes a person without an address, a member of the studio while the class lasts. The personal code is in this answer and nowhere else. */
export async function joinClass({ roomCode, firstName }: { roomCode: string, firstName: string }): Promise<SignedIn & { studio: StudioMembership, personalCode: string }> {
  const { code, hash } = await newPersonalCode()
  return await db().transaction(async (tx) => {
    // One after the other: equal first names are told apart by number.
    await tx.select({ id: classes.id }).from(classes).where(eq(classes.roomCode, roomCode)).for('no key update')
    const { row, studio } = await classBehind(tx, roomCode)
    const user = { id: uuidv7(), name: await freeNameIn(tx, row, firstName), email: null }
    await tx.insert(users).values(user)
    await tx.insert(memberships).values({ studioId: studio.id, userId: user.id, role: 'member' })
    await tx.insert(classStudents).values({ studioId: studio.id, id: user.id, classId: row.id, codeHash: hash })
    await recordEvent(tx, { studioId: studio.id, userId: user.id, kind: 'class.joined', recordId: row.id })
    await hintBoard(tx, row)
    return { user, studio: { ...studio, role: 'member' as const, class: showOwnClass(row) }, personalCode: code, sessionId: await openSession(tx, user.id) }
  })
}

async function freeNameIn(tx: Transaction, row: typeof classes.$inferSelect, firstName: string): Promise<string> {
  const inClass = await tx.select({ name: users.name }).from(classStudents).innerJoin(users, eq(users.id, classStudents.id))
    .where(and(eq(classStudents.studioId, row.studioId), eq(classStudents.classId, row.id)))
  if (inClass.length >= limits.studentsMax) throw new ComputeError('class_full', `This class is full: it takes ${limits.studentsMax} students. Tell your teacher.`)
  return freeFirstName(firstName, inClass.map(one => one.name))
}

/** Back by the personal code, until the time to take things along is over. */
export async function returnToClass(personalCode: string): Promise<SignedIn> {
  const [found] = await db().select({ id: users.id, name: users.name, email: users.email }).from(classStudents)
    .innerJoin(users, eq(users.id, classStudents.id)).innerJoin(classes, and(eq(classes.studioId, classStudents.studioId), eq(classes.id, classStudents.classId)))
    .where(and(eq(classStudents.codeHash, await hashOfPersonalCode(personalCode)), isStudent, sql`not ${isPast()}`))
  if (!found) throw new ComputeError('link_void', 'This personal code opens nothing. Compare it with your note, or ask your teacher for a new one.')
  return await db().transaction(tx => signInAs(tx, found))
}
