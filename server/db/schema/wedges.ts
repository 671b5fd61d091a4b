import { doublePrecision, foreignKey, index, integer, jsonb, pgTable, primaryKey, text, unique, uuid, varchar } from 'drizzle-orm/pg-core'
import type { z } from 'zod'
import type { WedgePlan } from '../../../shared/calibration/wedge/plan'
import type { path } from '../../../shared/schemas/benches'
import { wedgeKinds } from '../../../shared/schemas/wedges'
import { benches } from './benches'
import { createdAt, instant, revision, studioId } from './columns'
import { curves } from './curves'
import { users } from './people'

export const wedges = pgTable('wedges', {
  studioId: studioId(),
  id: uuid().notNull(),
  benchId: uuid().notNull(),
  /** what stands on the film, readable on every print of it; unique everywhere */
  code: varchar({ length: 10 }).notNull().unique(),
  kind: varchar({ length: 20, enum: wedgeKinds }).notNull(),
  plan: jsonb().$type<WedgePlan>().notNull(),
  widthMm: doublePrecision().notNull(),
  heightMm: doublePrecision().notNull(),
  pixelsPerInch: integer().notNull(),
  throughCurveId: uuid(),
  /** as the bench's were when it was laid out */
  inkColor: varchar({ length: 7 }).notNull(),
  path: jsonb().$type<z.infer<typeof path>>().notNull(),
  bodyHash: varchar({ length: 64 }).notNull(),
  createdBy: uuid().references(() => users.id),
  archivedAt: instant(),
  createdAt: createdAt(),
}, t => [
  primaryKey({ columns: [t.studioId, t.id] }),
  unique('wedges_of_bench').on(t.studioId, t.benchId, t.id),
  foreignKey({ columns: [t.studioId, t.benchId], foreignColumns: [benches.studioId, benches.id] }),
  foreignKey({ columns: [t.studioId, t.benchId, t.throughCurveId], foreignColumns: [curves.studioId, curves.benchId, curves.id] }),
  index('wedges_bench').on(t.studioId, t.benchId, t.id),
])

/** Each time the film is exposed. */
export const wedgePrints = pgTable('wedge_prints', {
  studioId: studioId(),
  id: uuid().notNull(),
  wedgeId: uuid().notNull(),
  benchId: uuid().notNull(),
  number: integer().notNull(),
  exposureValue: doublePrecision(),
  exposureUnit: varchar({ length: 8, enum: ['s', 'dose'] }),
  exposedAt: instant(),
  driedSince: instant(),
  notes: text().notNull().default(''),
  bodyHash: varchar({ length: 64 }).notNull(),
  createdBy: uuid().references(() => users.id),
  createdAt: createdAt(),
  revision: revision(),
}, t => [
  primaryKey({ columns: [t.studioId, t.id] }),
  unique('wedge_prints_of_wedge').on(t.studioId, t.wedgeId, t.id),
  unique('wedge_prints_number').on(t.studioId, t.wedgeId, t.number),
  foreignKey({ columns: [t.studioId, t.benchId, t.wedgeId], foreignColumns: [wedges.studioId, wedges.benchId, wedges.id] }),
])
