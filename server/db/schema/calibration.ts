import { doublePrecision, foreignKey, index, integer, jsonb, pgTable, primaryKey, text, unique, uuid, varchar } from 'drizzle-orm/pg-core'
import type { ExposureGoal } from '../../../shared/calibration/base-exposure'
import type { FilmDensities, Tablet } from '../../../shared/schemas/calibration'
import { walkStates, walkSteps } from '../../../shared/schemas/calibration'
import type { Warning } from '../../../shared/schemas/curves'
import { benches } from './benches'
import { createdAt, instant, revision, studioId } from './columns'
import { curves } from './curves'
import { users } from './people'
import { readings } from './readings'

/** What a strip gave with a base exposure. */
export interface FoundBaseExposure { goal: ExposureGoal, values: { exposureSeconds: number, lightness: number }[], blackLightness: number, warnings: Warning[] }

/** Dated entries of a bench; the newest is the one that counts. */
export const baseExposures = pgTable('base_exposures', {
  studioId: studioId(),
  id: uuid().notNull(),
  benchId: uuid().notNull(),
  value: doublePrecision().notNull(),
  unit: varchar({ length: 8, enum: ['s', 'dose'] }).notNull(),
  low: doublePrecision(),
  high: doublePrecision(),
  /** of an exposure strip; null where it was typed in */
  readingId: uuid(),
  found: jsonb().$type<FoundBaseExposure>(),
  bodyHash: varchar({ length: 64 }).notNull().default(''),
  createdBy: uuid().references(() => users.id),
  createdAt: createdAt(),
}, t => [
  primaryKey({ columns: [t.studioId, t.id] }),
  foreignKey({ columns: [t.studioId, t.benchId], foreignColumns: [benches.studioId, benches.id] }),
  foreignKey({ columns: [t.studioId, t.benchId, t.readingId], foreignColumns: [readings.studioId, readings.benchId, readings.id] }),
  index('base_exposures_bench').on(t.studioId, t.benchId, t.id),
])

export const tablets = pgTable('tablets', {
  studioId: studioId(),
  id: uuid().notNull(),
  benchId: uuid().notNull(),
  readingId: uuid(),
  values: jsonb('tablet_values').$type<Tablet['values']>().notNull(),
  result: jsonb().$type<Omit<Tablet, 'id' | 'benchId' | 'readingId' | 'values' | 'exposure' | 'createdAt'>>().notNull(),
  exposureValue: doublePrecision(),
  exposureUnit: varchar({ length: 8, enum: ['s', 'dose'] }),
  bodyHash: varchar({ length: 64 }).notNull(),
  createdBy: uuid().references(() => users.id),
  createdAt: createdAt(),
}, t => [
  primaryKey({ columns: [t.studioId, t.id] }),
  unique('tablets_of_bench').on(t.studioId, t.benchId, t.id),
  foreignKey({ columns: [t.studioId, t.benchId], foreignColumns: [benches.studioId, benches.id] }),
  foreignKey({ columns: [t.studioId, t.benchId, t.readingId], foreignColumns: [readings.studioId, readings.benchId, readings.id] }),
])

export const filmDensities = pgTable('film_densities', {
  studioId: studioId(),
  id: uuid().notNull(),
  benchId: uuid().notNull(),
  tabletId: uuid().notNull(),
  curveId: uuid().notNull(),
  points: jsonb().$type<FilmDensities['points']>().notNull(),
  warnings: jsonb().$type<Warning[]>().notNull().default([]),
  bodyHash: varchar({ length: 64 }).notNull(),
  createdBy: uuid().references(() => users.id),
  createdAt: createdAt(),
}, t => [
  primaryKey({ columns: [t.studioId, t.id] }),
  foreignKey({ columns: [t.studioId, t.benchId, t.tabletId], foreignColumns: [tablets.studioId, tablets.benchId, tablets.id] }),
  foreignKey({ columns: [t.studioId, t.benchId, t.curveId], foreignColumns: [curves.studioId, curves.benchId, curves.id] }),
])

/** What a person said of a step of the walk through a calibration; a step nobody touched has no row. */
export const walkStepRows = pgTable('walk_steps', {
  studioId: studioId(),
  benchId: uuid().notNull(),
  step: varchar({ length: 20, enum: walkSteps }).notNull(),
  state: varchar({ length: 10, enum: walkStates }),
  clockStartedAt: instant(),
  clockSeconds: integer(),
  notes: text().notNull().default(''),
  changedBy: uuid().references(() => users.id),
  changedAt: instant().notNull(),
  revision: revision(),
}, t => [
  primaryKey({ columns: [t.studioId, t.benchId, t.step] }),
  foreignKey({ columns: [t.studioId, t.benchId], foreignColumns: [benches.studioId, benches.id] }),
])
