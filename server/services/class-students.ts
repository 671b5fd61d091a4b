import { and, eq, isNotNull, isNull, sql } from 'drizzle-orm'
import { ComputeError } from '#shared/errors'
import { readSettings } from '../config'
import { db, type Transaction } from '../db/client'
import { classStudents, letterLinks, memberships } from '../db/schema'
import type { StudioAccess } from './access'
import { recordEvent } from './audit'
import { newPersonalCode } from './class-codes'
import { hintBoard } from './class-hints'
import { requireFound } from './revisions'
import { revokeSessionsOf } from './sessions'

/** A student's place in their class, as the teacher looks after it. */

interface Place { classId: string, studentId: string }

const at = (studio: StudioAccess, { classId, studentId }: Place) => and(eq(classStudents.studioId, studio.id), eq(classStudents.classId, classId), eq(classStudents.id, studentId))

async function tell(tx: Transaction, studio: StudioAccess, { classId, studentId }: Place, verb: string): Promise<void> {
  await recordEvent(tx, { studioId: studio.id, userId: studio.personId, kind: `class.student-${verb}`, recordId: studentId, details: { class: classId } })
  await hintBoard(tx, { studioId: studio.id, id: classId })
}

/** Locks the student's row, so that nobody turns into an account meanwhile. */
async function requireStudent(tx: Transaction, studio: StudioAccess, place: Place): Promise<void> {
  const [row] = await tx.select().from(classStudents).where(and(at(studio, place), isNull(classStudents.removedAt))).for('update')
  if (requireFound(row).keptAt) throw new ComputeError('wrong_state', 'This student has an account of their own by now. An owner looks after it under People, and a forgotten password is set anew on the sign-in page.')
}

/** Out at once; their things are erased after the time of grace, until which they can be taken in again. */
export async function removeStudent(studio: StudioAccess, place: Place): Promise<void> {
  await db().transaction(async (tx) => {
    await requireStudent(tx, studio, place)
    await tx.update(classStudents).set({ removedAt: sql`now()` }).where(at(studio, place))
    await tx.delete(memberships).where(and(eq(memberships.studioId, studio.id), eq(memberships.userId, place.studentId)))
    // A letter on its way must not bring them back as an account.
    await tx.update(letterLinks).set({ usedAt: sql`now()` }).where(and(eq(letterLinks.userId, place.studentId), isNull(letterLinks.usedAt)))
    await revokeSessionsOf(tx, place.studentId)
    await tell(tx, studio, place, 'removed')
  })
}

/** For queries over `class_students`: taken out so long ago that they are erased. */
export const removalIsDue = () => sql`${classStudents.removedAt} + make_interval(secs => ${86_400 * readSettings().ERASURE_GRACE_DAYS}) <= now()`

export async function restoreStudent(studio: StudioAccess, place: Place): Promise<void> {
  await db().transaction(async (tx) => {
    const [row] = await tx.update(classStudents).set({ removedAt: null }).where(and(at(studio, place), isNotNull(classStudents.removedAt), sql`not ${removalIsDue()}`)).returning()
    requireFound(row)
    await tx.insert(memberships).values({ studioId: studio.id, userId: place.studentId, role: 'member' }).onConflictDoNothing()
    await tell(tx, studio, place, 'restored')
  })
}

/** For a note that got lost, or a phone: whoever holds the old code or a session of before is out. */
export async function renewPersonalCode(studio: StudioAccess, place: Place): Promise<string> {
  const { code, hash } = await newPersonalCode()
  await db().transaction(async (tx) => {
    await requireStudent(tx, studio, place)
    await tx.update(classStudents).set({ codeHash: hash }).where(at(studio, place))
    await revokeSessionsOf(tx, place.studentId)
    await tell(tx, studio, place, 'code-renewed')
  })
  return code
}

/** The student has an account with an address now: the class no longer decides over it, and the personal code opens nothing. */
export async function keepStudent(tx: Transaction, userId: string): Promise<void> {
  const [row] = await tx.update(classStudents).set({ keptAt: sql`now()`, codeHash: null }).where(and(eq(classStudents.id, userId), isNull(classStudents.keptAt))).returning()
  if (!row) return
  await recordEvent(tx, { studioId: row.studioId, userId, kind: 'class.student-kept', recordId: userId, details: { class: row.classId } })
  await hintBoard(tx, { studioId: row.studioId, id: row.classId })
}
