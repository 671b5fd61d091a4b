import { foreignKey, index, pgTable, primaryKey, uniqueIndex, uuid, varchar } from 'drizzle-orm/pg-core'
import { limits } from '../../../shared/schemas/limits'
import { createdAt, instant, revision, studioId } from './columns'
import { studios, users } from './people'

/** A teacher's group for a time. It is open until `endsAt`; then its students can take their things along for some days. */
export const classes = pgTable('classes', {
  studioId: studioId().references(() => studios.id),
  id: uuid().notNull(),
  name: varchar({ length: limits.nameLength }).notNull(),
  endsAt: instant().notNull(),
  /** what students type or scan; null once the class was erased, so that no code leads to it for ever */
  roomCode: varchar({ length: 8 }),
  /** when the teacher closed the door; null while students may join */
  joiningClosedAt: instant(),
  /** when its students' accounts and things were erased */
  erasedAt: instant(),
  openedBy: uuid().notNull().references(() => users.id),
  bodyHash: varchar({ length: 64 }).notNull(),
  createdAt: createdAt(),
  revision: revision(),
}, t => [primaryKey({ columns: [t.studioId, t.id] }), uniqueIndex('classes_room_code').on(t.roomCode), index('classes_end').on(t.endsAt)])

/** A user who joined with a first name alone. The row goes with the class, or when the student is erased. */
export const classStudents = pgTable('class_students', {
  studioId: studioId(),
  /** the user's own id */
  id: uuid().notNull().unique().references(() => users.id),
  classId: uuid().notNull(),
  /** of the personal code; null once the student has an account of their own */
  codeHash: varchar({ length: 64 }).unique(),
  /** when the student turned into an account with an address */
  keptAt: instant(),
  removedAt: instant(),
  joinedAt: createdAt(),
}, t => [
  primaryKey({ columns: [t.studioId, t.id] }),
  foreignKey({ columns: [t.studioId, t.classId], foreignColumns: [classes.studioId, classes.id] }),
  index('class_students_class').on(t.studioId, t.classId),
])
