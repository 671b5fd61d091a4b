import { sql } from 'drizzle-orm'
import type { Queryable } from '../db/client'
import { hint, hintChannel } from './hints'

/** To the owners and technicians who may look at the board. */
export const hintBoard = (on: Queryable, { studioId, id, revision }: { studioId: string, id: string, revision?: number }): Promise<void> =>
  hint(on, { studioId, topic: 'classes', id, revision, leastRole: 'technician' })

/** The same when it is a student who has done something; nothing for anybody else. */
export async function hintBoardOf(on: Queryable, studioId: string, personId: string): Promise<void> {
  await on.execute(sql`select pg_notify(${hintChannel}, json_build_object('studioId', studio_id, 'topic', 'classes', 'id', class_id, 'revision', 1, 'leastRole', 'technician')::text)
    from class_students where studio_id = ${studioId} and id = ${personId}`)
}

/** To the board of the photo's uploader: a film of it is ready. */
export async function hintBoardOfPhoto(on: Queryable, studioId: string, photoId: string): Promise<void> {
  await on.execute(sql`select pg_notify(${hintChannel}, json_build_object('studioId', s.studio_id, 'topic', 'classes', 'id', s.class_id, 'revision', 1, 'leastRole', 'technician')::text)
    from class_students s join photos p on p.studio_id = s.studio_id and p.uploader_id = s.id where p.studio_id = ${studioId} and p.id = ${photoId}`)
}

/** Tells each student, and nobody else, that their class itself has changed. */
export async function hintStudents(on: Queryable, { studioId, id, revision }: { studioId: string, id: string, revision: number }): Promise<void> {
  await on.execute(sql`select pg_notify(${hintChannel}, json_build_object('studioId', studio_id, 'topic', 'classes', 'id', ${id}::text, 'revision', ${revision}::int, 'onlyFor', id)::text)
    from class_students where studio_id = ${studioId} and class_id = ${id}`)
}
