import { sql, type SQL } from 'drizzle-orm'
import type { OwnClass } from '#shared/schemas/people'
import { readSettings } from '../config'
import { classes, classStudents } from '../db/schema'

const dayMs = 86_400_000

/** When a class's students and their things are erased. */
export const takeAlongUntil = (endsAt: Date): Date => new Date(endsAt.getTime() + dayMs * readSettings().CLASS_TAKE_ALONG_DAYS)
export const isOver = (endsAt: Date): boolean => endsAt.getTime() <= Date.now()

/** For queries over `classes`: over, and the time to take things along has passed too. */
export const isPast = (): SQL => sql`${classes.endsAt} + make_interval(secs => ${86_400 * readSettings().CLASS_TAKE_ALONG_DAYS}) <= now()`

/** For queries over `class_students`: still a student, neither turned into an account nor taken out. */
export const isStudent = sql`${classStudents.keptAt} is null and ${classStudents.removedAt} is null`

export const showOwnClass = ({ id, name, endsAt }: { id: string, name: string, endsAt: Date }): OwnClass =>
  ({ id, name, endsAt: endsAt.toISOString(), takeAlongUntil: takeAlongUntil(endsAt).toISOString(), isOver: isOver(endsAt) })
