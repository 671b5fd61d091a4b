import { and, asc, eq, inArray, isNotNull, isNull, sql } from 'drizzle-orm'
import { stepOf } from '#shared/classes/steps'
import type { ClassBoard, ClassStudent } from '#shared/schemas/classes'
import { db } from '../db/client'
import { classStudents, negatives, users } from '../db/schema'
import type { StudioAccess } from './access'
import { classOf } from './classes'

/** Who is at which step, by what there is of theirs; nothing that they have not handed in is shown. */
export async function classBoard(studio: StudioAccess, id: string): Promise<ClassBoard> {
  const record = await classOf(studio, id)
  const rows = await studentsOf(studio, id)
  const handedIn = await handedInBy(studio, rows.map(row => row.id))
  const students = rows.map(({ photos, negatives, films, keptAt, removedAt, joinedAt, ...student }): ClassStudent => {
    const theirs = handedIn.filter(one => one.createdBy === student.id).map(({ createdBy: _, ...one }) => one)
    return { ...student, hasAccount: keptAt !== null, removedAt: removedAt?.toISOString() ?? null, joinedAt: joinedAt.toISOString(), step: stepOf({ photos, negatives, films, handedIn: theirs.length }), handedIn: removedAt ? [] : theirs }
  })
  return { ...record, students }
}

const mine = sql`studio_id = ${classStudents.studioId}`
const studentsOf = (studio: StudioAccess, classId: string) => db().select({
  id: users.id, name: users.name, keptAt: classStudents.keptAt, removedAt: classStudents.removedAt, joinedAt: classStudents.joinedAt,
  photos: sql<number>`(select count(*)::int from photos p where p.${mine} and p.uploader_id = ${classStudents.id} and p.binned_at is null)`,
  negatives: sql<number>`(select count(*)::int from negatives n where n.${mine} and n.created_by = ${classStudents.id} and n.archived_at is null)`,
  films: sql<number>`(select count(*)::int from renders r join photos p on p.studio_id = r.studio_id and p.id = r.photo_id where r.${mine} and p.uploader_id = ${classStudents.id} and r.state = 'ready')`,
}).from(classStudents).innerJoin(users, eq(users.id, classStudents.id))
  .where(and(eq(classStudents.studioId, studio.id), eq(classStudents.classId, classId))).orderBy(asc(users.name), asc(users.id))

async function handedInBy(studio: StudioAccess, makers: string[]) {
  if (makers.length === 0) return []
  const rows = await db().select({ id: negatives.id, name: negatives.name, revision: negatives.revision, settings: negatives.settings, createdBy: negatives.createdBy, handedInAt: negatives.handedInAt }).from(negatives)
    .where(and(eq(negatives.studioId, studio.id), inArray(negatives.createdBy, makers), isNotNull(negatives.handedInAt), isNull(negatives.archivedAt))).orderBy(asc(negatives.handedInAt))
  return rows.map(({ settings, handedInAt, ...row }) => ({ ...row, handedInAt: handedInAt!.toISOString(), mirror: settings.mirror, opaque: settings.margin.kind === 'opaque' }))
}
