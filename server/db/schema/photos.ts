import { sql } from 'drizzle-orm'
import { bigint, boolean, check, foreignKey, index, integer, jsonb, pgTable, primaryKey, real, text, uniqueIndex, uuid, varchar } from 'drizzle-orm/pg-core'
import type { z } from 'zod'
import { aims, workStates } from '../../../shared/schemas/curves'
import type { FilmOrder, WedgeFilmOrder } from '../../image/protocol'
import { limits } from '../../../shared/schemas/limits'
import type { crop, margin, marks, Adjustments } from '../../../shared/schemas/negatives'
import { filmFormats } from '../../../shared/schemas/negatives'
import { pictureFormats, type PictureNote } from '../../../shared/schemas/picture-formats'
import { benches } from './benches'
import { createdAt, instant, revision, studioId } from './columns'
import { curves } from './curves'
import { studios, users } from './people'
import { wedges } from './wedges'

export const photos = pgTable('photos', {
  studioId: studioId().references(() => studios.id),
  id: uuid().notNull(),
  uploaderId: uuid().notNull().references(() => users.id),
  name: varchar({ length: limits.nameLength }).notNull(),
  format: varchar({ length: 10, enum: pictureFormats }).notNull(),
  bytes: bigint({ mode: 'number' }).notNull(),
  sha256: varchar({ length: 64 }).notNull(),
  /** pixels of the upright picture */
  width: integer().notNull(),
  height: integer().notNull(),
  orientation: integer().notNull(),
  colourProfile: varchar({ length: 120 }).notNull(),
  /** what else the file holds and is left out */
  notes: jsonb().$type<PictureNote[]>().notNull().default([]),
  binnedAt: instant(),
  createdAt: createdAt(),
  revision: revision(),
}, t => [
  primaryKey({ columns: [t.studioId, t.id] }),
  uniqueIndex('photos_same_bytes').on(t.studioId, t.uploaderId, t.sha256),
  index('photos_uploader').on(t.studioId, t.uploaderId, t.id),
  check('photos_orientation', sql`${t.orientation} between 1 and 8`),
])

/** All that decides what the film looks like, resolved when the negative is made or changed. */
export interface NegativeSettings {
  size: { widthMm: number, heightMm: number }
  fit: 'crop' | 'contain'
  crop: z.infer<typeof crop> | null
  quarterTurns: number
  straightenDegrees: number
  pixelsPerInch: number
  mirror: boolean
  adjustments: Adjustments
  margin: z.infer<typeof margin>
  marks: z.infer<typeof marks>
}

export const negatives = pgTable('negatives', {
  studioId: studioId(),
  id: uuid().notNull(),
  name: varchar({ length: limits.nameLength }).notNull(),
  photoId: uuid().notNull(),
  benchId: uuid().notNull(),
  curveId: uuid().notNull(),
  aim: varchar({ length: 24, enum: aims }).notNull(),
  settings: jsonb().$type<NegativeSettings>().notNull(),
  bodyHash: varchar({ length: 64 }).notNull(),
  createdBy: uuid().notNull().references(() => users.id),
  archivedAt: instant(),
  /** since when a student's class shows it to the studio's owners and technicians */
  handedInAt: instant(),
  createdAt: createdAt(),
  revision: revision(),
}, t => [
  primaryKey({ columns: [t.studioId, t.id] }),
  foreignKey({ columns: [t.studioId, t.photoId], foreignColumns: [photos.studioId, photos.id] }),
  foreignKey({ columns: [t.studioId, t.benchId], foreignColumns: [benches.studioId, benches.id] }),
  foreignKey({ columns: [t.studioId, t.benchId, t.curveId], foreignColumns: [curves.studioId, curves.benchId, curves.id] }),
  index('negatives_maker').on(t.studioId, t.createdBy, t.id),
  index('negatives_photo').on(t.studioId, t.photoId),
])

/**
 * One film file, by the hash of everything that decides its bytes: negatives with equal settings share it.
 * The row is the truth about the work; the file is a cache. A file that was put out of the cache has no row.
 */
export const renders = pgTable('renders', {
  studioId: studioId(),
  id: uuid().notNull(),
  /** what is on the film: a negative's photo, or a wedge */
  photoId: uuid(),
  wedgeId: uuid(),
  renderKey: varchar({ length: 64 }).notNull(),
  format: varchar({ length: 8, enum: filmFormats }).notNull(),
  state: varchar({ length: 10, enum: workStates }).notNull(),
  progress: real().notNull().default(0),
  /** the resolved instruction for the image engine */
  order: jsonb('film_order').$type<FilmOrder | WedgeFilmOrder>().notNull(),
  leaseOwner: varchar({ length: 80 }),
  leaseUntil: instant(),
  /** counts how often the work was taken up; checked when it is handed in */
  fence: integer().notNull().default(0),
  /** attempts that ended in a crash of the image child or an unexpected error; the third ends the work */
  failures: integer().notNull().default(0),
  requestId: varchar({ length: 64 }),
  errorCode: varchar({ length: 60 }),
  errorMessage: text(),
  bytes: bigint({ mode: 'number' }),
  sha256: varchar({ length: 64 }),
  pinned: boolean().notNull().default(false),
  createdAt: createdAt(),
  readyAt: instant(),
  lastUsedAt: instant(),
}, t => [
  primaryKey({ columns: [t.studioId, t.id] }),
  uniqueIndex('renders_key').on(t.studioId, t.renderKey),
  foreignKey({ columns: [t.studioId, t.photoId], foreignColumns: [photos.studioId, photos.id] }),
  foreignKey({ columns: [t.studioId, t.wedgeId], foreignColumns: [wedges.studioId, wedges.id] }),
  check('renders_subject', sql`num_nonnulls(${t.photoId}, ${t.wedgeId}) = 1`),
  index('renders_open').on(t.createdAt).where(sql`${t.state} in ('waiting', 'making')`),
])
