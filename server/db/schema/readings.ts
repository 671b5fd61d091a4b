import { sql } from 'drizzle-orm'
import { bigint, foreignKey, index, integer, jsonb, pgTable, primaryKey, real, text, unique, uuid, varchar } from 'drizzle-orm/pg-core'
import type { ReadingEvidence, Warning } from '../../../shared/schemas/curves'
import { workStates } from '../../../shared/schemas/curves'
import { limits } from '../../../shared/schemas/limits'
import { pictureFormats } from '../../../shared/schemas/picture-formats'
import { benches } from './benches'
import { createdAt, instant, studioId } from './columns'
import { curves } from './curves'
import { users } from './people'
import { scannerProfiles } from './scanner-profiles'
import { scanners } from './shelf'
import { wedgePrints, wedges } from './wedges'

export interface ReadingOrder {
  corners?: [[number, number], [number, number], [number, number], [number, number]]
  quality?: 'scan' | 'phone'
  /** the number pencilled on the print */
  printNumber?: number
  /** L* of the bare paper, for phone pictures */
  paperLightness?: number
}

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
  /** of a scan: the film whose print it shows, and which print of it */
  wedgeId: uuid(),
  wedgePrintId: uuid(),
  scannerId: uuid(),
  scannerProfileId: uuid(),
  /** the scan's file: its key follows from the ids */
  fileName: varchar({ length: limits.nameLength }),
  fileBytes: bigint({ mode: 'number' }),
  fileSha256: varchar({ length: 64 }),
  fileFormat: varchar({ length: 8, enum: pictureFormats }),
  /** pixels of the upright picture */
  fileWidth: integer(),
  fileHeight: integer(),
  /** how a person asked for it to be read */
  order: jsonb('reading_order').$type<ReadingOrder>().notNull().default({}),
  corners: jsonb().$type<[number, number][]>(),
  evidence: jsonb().$type<ReadingEvidence>(),
  progress: real().notNull().default(1),
  leaseOwner: varchar({ length: 80 }),
  leaseUntil: instant(),
  fence: integer().notNull().default(0),
  failures: integer().notNull().default(0),
  requestId: varchar({ length: 64 }),
  errorCode: varchar({ length: 60 }),
  errorMessage: text(),
  bodyHash: varchar({ length: 64 }).notNull(),
  createdBy: uuid().references(() => users.id),
  createdAt: createdAt(),
  readyAt: instant(),
}, t => [
  primaryKey({ columns: [t.studioId, t.id] }),
  unique('readings_of_bench').on(t.studioId, t.benchId, t.id),
  foreignKey({ columns: [t.studioId, t.benchId], foreignColumns: [benches.studioId, benches.id] }),
  foreignKey({ columns: [t.studioId, t.benchId, t.wedgeId], foreignColumns: [wedges.studioId, wedges.benchId, wedges.id] }),
  foreignKey({ columns: [t.studioId, t.wedgeId, t.wedgePrintId], foreignColumns: [wedgePrints.studioId, wedgePrints.wedgeId, wedgePrints.id] }),
  foreignKey({ columns: [t.studioId, t.scannerId], foreignColumns: [scanners.studioId, scanners.id] }),
  foreignKey({ columns: [t.studioId, t.scannerProfileId], foreignColumns: [scannerProfiles.studioId, scannerProfiles.id] }),
  index('readings_open').on(t.createdAt).where(sql`${t.state} in ('waiting', 'making')`),
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
