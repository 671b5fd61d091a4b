import { sql } from 'drizzle-orm'
import { boolean, check, doublePrecision, foreignKey, index, integer, jsonb, pgTable, primaryKey, real, text, unique, uniqueIndex, uuid, varchar } from 'drizzle-orm/pg-core'
import type { z } from 'zod'
import type { ink, path, recipe } from '../../../shared/schemas/benches'
import { processes, readingChannels } from '../../../shared/schemas/benches'
import type { Warning } from '../../../shared/schemas/curves'
import { aims, curveStates, workStates } from '../../../shared/schemas/curves'
import { limits } from '../../../shared/schemas/limits'
import { createdAt, instant, revision, studioId } from './columns'
import { studios, users } from './people'
import { films, inkjets, lamps, papers, sensitizers } from './shelf'

export const benches = pgTable('benches', {
  studioId: studioId().references(() => studios.id),
  id: uuid().notNull(),
  name: varchar({ length: limits.nameLength }).notNull(),
  process: varchar({ length: 40, enum: processes }).notNull(),
  paperId: uuid(), sensitizerId: uuid(), filmId: uuid(), inkjetId: uuid(), lampId: uuid(),
  recipe: jsonb().$type<z.infer<typeof recipe>>().notNull().default({}),
  path: jsonb().$type<z.infer<typeof path>>().notNull().default({}),
  ink: jsonb().$type<z.infer<typeof ink>>().notNull(),
  readingChannel: varchar({ length: 20, enum: readingChannels }).notNull(),
  mirror: boolean().notNull(),
  starter: boolean().notNull().default(false),
  bodyHash: varchar({ length: 64 }).notNull(),
  archivedAt: instant(),
  createdAt: createdAt(),
  revision: revision(),
}, t => [
  primaryKey({ columns: [t.studioId, t.id] }),
  uniqueIndex('benches_one_starter').on(t.studioId, t.process).where(sql`${t.starter}`),
  foreignKey({ columns: [t.studioId, t.paperId], foreignColumns: [papers.studioId, papers.id] }),
  foreignKey({ columns: [t.studioId, t.sensitizerId], foreignColumns: [sensitizers.studioId, sensitizers.id] }),
  foreignKey({ columns: [t.studioId, t.filmId], foreignColumns: [films.studioId, films.id] }),
  foreignKey({ columns: [t.studioId, t.inkjetId], foreignColumns: [inkjets.studioId, inkjets.id] }),
  foreignKey({ columns: [t.studioId, t.lampId], foreignColumns: [lamps.studioId, lamps.id] }),
])

/** Dated entries of a bench; the newest is the one that counts. */
export const baseExposures = pgTable('base_exposures', {
  studioId: studioId(),
  id: uuid().notNull(),
  benchId: uuid().notNull(),
  value: doublePrecision().notNull(),
  unit: varchar({ length: 8, enum: ['s', 'dose'] }).notNull(),
  low: doublePrecision(),
  high: doublePrecision(),
  createdBy: uuid().references(() => users.id),
  createdAt: createdAt(),
}, t => [
  primaryKey({ columns: [t.studioId, t.id] }),
  foreignKey({ columns: [t.studioId, t.benchId], foreignColumns: [benches.studioId, benches.id] }),
  index('base_exposures_bench').on(t.studioId, t.benchId, t.id),
])

export interface StoredPatch { level: number, lightness: number | null, lab: [number, number, number] | null, deviation: number | null, used: boolean }

export const readings = pgTable('readings', {
  studioId: studioId(),
  id: uuid().notNull(),
  benchId: uuid().notNull(),
  state: varchar({ length: 10, enum: workStates }).notNull(),
  quality: varchar({ length: 10, enum: ['scan', 'phone', 'measured'] }).notNull(),
  unit: varchar({ length: 12, enum: ['lightness', 'density', 'reflectance'] }),
  zero: varchar({ length: 10, enum: ['absolute', 'paper'] }),
  paperLightness: real(),
  patches: jsonb().$type<StoredPatch[]>().notNull(),
  warnings: jsonb().$type<Warning[]>().notNull().default([]),
  bodyHash: varchar({ length: 64 }).notNull(),
  createdBy: uuid().references(() => users.id),
  createdAt: createdAt(),
}, t => [
  primaryKey({ columns: [t.studioId, t.id] }),
  unique('readings_of_bench').on(t.studioId, t.benchId, t.id),
  foreignKey({ columns: [t.studioId, t.benchId], foreignColumns: [benches.studioId, benches.id] }),
])

export const curves = pgTable('curves', {
  studioId: studioId(),
  id: uuid().notNull(),
  benchId: uuid().notNull(),
  version: integer().notNull(),
  state: varchar({ length: 10, enum: curveStates }).notNull(),
  aim: varchar({ length: 24, enum: aims }).notNull(),
  calibrated: boolean().notNull(),
  assumptions: jsonb().$type<string[]>().notNull().default([]),
  /** the bench's response: the print's reading-channel value at 1025 equal steps of ink level, clear film first, increasing */
  response: jsonb().$type<number[]>().notNull(),
  responseLow: jsonb().$type<number[]>(),
  responseHigh: jsonb().$type<number[]>(),
  expectedError: jsonb().$type<{ nextPrint: { median: number, p95: number }, curve: { median: number, p95: number } }>(),
  warnings: jsonb().$type<Warning[]>().notNull().default([]),
  notes: text().notNull().default(''),
  bodyHash: varchar({ length: 64 }).notNull(),
  createdBy: uuid().references(() => users.id),
  createdAt: createdAt(),
  inUseSince: instant(),
}, t => [
  primaryKey({ columns: [t.studioId, t.id] }),
  unique('curves_of_bench').on(t.studioId, t.benchId, t.id),
  unique('curves_version').on(t.studioId, t.benchId, t.version),
  uniqueIndex('curves_one_in_use').on(t.studioId, t.benchId).where(sql`${t.state} = 'in-use'`),
  foreignKey({ columns: [t.studioId, t.benchId], foreignColumns: [benches.studioId, benches.id] }),
  check('curves_state', sql`${t.state} in ('draft', 'in-use', 'retired')`),
])

export const curveReadings = pgTable('curve_readings', {
  studioId: studioId(),
  benchId: uuid().notNull(),
  curveId: uuid().notNull(),
  readingId: uuid().notNull(),
}, t => [
  primaryKey({ columns: [t.studioId, t.curveId, t.readingId] }),
  foreignKey({ columns: [t.studioId, t.benchId, t.curveId], foreignColumns: [curves.studioId, curves.benchId, curves.id] }),
  foreignKey({ columns: [t.studioId, t.benchId, t.readingId], foreignColumns: [readings.studioId, readings.benchId, readings.id] }),
])
