import { foreignKey, index, jsonb, pgTable, primaryKey, text, uuid, varchar } from 'drizzle-orm/pg-core'
import { processes } from '../../../shared/schemas/benches'
import type { ScannerProfile } from '../../../shared/schemas/calibration'
import type { Warning } from '../../../shared/schemas/curves'
import { createdAt, instant, studioId } from './columns'
import { users } from './people'
import { scanners } from './shelf'

/** How a scanner sees a process; the newest of a scanner and process counts. */
export const scannerProfiles = pgTable('scanner_profiles', {
  studioId: studioId(),
  id: uuid().notNull(),
  scannerId: uuid().notNull(),
  process: varchar({ length: 40, enum: processes }).notNull(),
  kind: varchar({ length: 20, enum: ['grey-scale', 'own-print'] }).notNull(),
  points: jsonb().$type<ScannerProfile['points']>().notNull(),
  warnings: jsonb().$type<Warning[]>().notNull().default([]),
  notes: text().notNull().default(''),
  bodyHash: varchar({ length: 64 }).notNull(),
  createdBy: uuid().references(() => users.id),
  archivedAt: instant(),
  createdAt: createdAt(),
}, t => [
  primaryKey({ columns: [t.studioId, t.id] }),
  foreignKey({ columns: [t.studioId, t.scannerId], foreignColumns: [scanners.studioId, scanners.id] }),
  index('scanner_profiles_scanner').on(t.studioId, t.scannerId, t.id),
])
