import { and, eq, inArray, isNotNull, isNull, or, sql } from 'drizzle-orm'
import { db } from '../db/client'
import { classes, classStudents, negatives } from '../db/schema'
import { recordEvent } from './audit'
import { removalIsDue } from './class-students'
import { isPast } from './class-times'
import { eraseAccount } from './erasure'

/**
 * Erases the students, their things and files, of classes whose time to take things along is over, and those who were taken out
 * long enough ago. The class is closed for good first, so that nobody moves its end while its students go. Broken off, it goes on where it was.
 */
export async function erasePastStudents(): Promise<{ kind: 'student', id: string }[]> {
  await closePastClasses()
  const due = await db().select({ id: classStudents.id }).from(classStudents)
    .innerJoin(classes, and(eq(classes.studioId, classStudents.studioId), eq(classes.id, classStudents.classId)))
    .where(and(isNull(classStudents.keptAt), or(isNotNull(classes.erasedAt), removalIsDue())))
  for (const { id } of due) await eraseAccount(id)
  await letKeptStudentsGo()
  return due.map(({ id }) => ({ kind: 'student' as const, id }))
}

async function closePastClasses(): Promise<void> {
  await db().transaction(async (tx) => {
    const rows = await tx.update(classes).set({ erasedAt: sql`now()`, roomCode: null, revision: sql`${classes.revision} + 1` }).where(and(isNull(classes.erasedAt), isPast())).returning()
    for (const { studioId, id } of rows) await recordEvent(tx, { studioId, kind: 'class.erased', recordId: id })
  })
}

/** Whoever has an account by now keeps everything, and it is private again. */
async function letKeptStudentsGo(): Promise<void> {
  await db().transaction(async (tx) => {
    const isOfErasedClass = sql`exists (select 1 from classes c where c.studio_id = ${classStudents.studioId} and c.id = ${classStudents.classId} and c.erased_at is not null)`
    const kept = await tx.delete(classStudents).where(and(isNotNull(classStudents.keptAt), isOfErasedClass)).returning({ id: classStudents.id })
    if (kept.length) await tx.update(negatives).set({ handedInAt: null }).where(inArray(negatives.createdBy, kept.map(one => one.id)))
  })
}
