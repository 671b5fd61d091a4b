import { sql } from 'drizzle-orm'
import { bigint, check, foreignKey, index, pgTable, primaryKey, text, uuid, varchar } from 'drizzle-orm/pg-core'
import { limits } from '../../../shared/schemas/limits'
import { uploadOrigins, uploadStates } from '../../../shared/schemas/uploads'
import { createdAt, instant, studioId } from './columns'
import { studios, users } from './people'
import { photos } from './photos'

/**
 * A file that arrives piece by piece. How much of it is there is told by the part on the disk, so that no piece counts
 * that a killed process had only in its memory.
 */
export const uploads = pgTable('uploads', {
  studioId: studioId().references(() => studios.id),
  id: uuid().notNull(),
  personId: uuid().notNull().references(() => users.id),
  fileName: varchar({ length: limits.fileNameLength }).notNull(),
  bytes: bigint({ mode: 'number' }).notNull(),
  lastModifiedMs: bigint({ mode: 'number' }),
  fingerprint: varchar({ length: 8 }),
  origin: varchar({ length: 12, enum: uploadOrigins }).notNull(),
  state: varchar({ length: 12, enum: uploadStates }).notNull().default('unfinished'),
  photoId: uuid(),
  refusalCode: varchar({ length: 60 }),
  refusalMessage: text(),
  createdAt: createdAt(),
  finishedAt: instant(),
}, t => [
  primaryKey({ columns: [t.studioId, t.id] }),
  foreignKey({ columns: [t.studioId, t.photoId], foreignColumns: [photos.studioId, photos.id] }),
  index('uploads_person').on(t.studioId, t.personId, t.id),
  index('uploads_photo').on(t.studioId, t.photoId),
  check('uploads_outcome', sql`(${t.state} = 'kept') = (${t.photoId} is not null) and (${t.state} = 'refused') = (${t.refusalCode} is not null)`),
])
