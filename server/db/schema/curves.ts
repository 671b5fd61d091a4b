import { sql } from 'drizzle-orm'
import { boolean, check, foreignKey, integer, jsonb, pgTable, primaryKey, text, unique, uniqueIndex, uuid, varchar } from 'drizzle-orm/pg-core'
import type { Curve, Warning } from '../../../shared/schemas/curves'
import { aims, curveStates } from '../../../shared/schemas/curves'
import { benches } from './benches'
import { createdAt, instant, revision, studioId } from './columns'
import { users } from './people'

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
  /** a 95 % band that holds for all levels at once */
  responseLowOfAll: jsonb().$type<number[]>(),
  responseHighOfAll: jsonb().$type<number[]>(),
  expectedError: jsonb().$type<NonNullable<Curve['expectedError']>>(),
  /** what the fit found beside the response */
  basis: jsonb().$type<NonNullable<Curve['basis']>>(),
  /** L*, a*, b* of the print from paper white to deepest tone */
  colourPath: jsonb().$type<[number, number, number][]>(),
  warnings: jsonb().$type<Warning[]>().notNull().default([]),
  notes: text().notNull().default(''),
  bodyHash: varchar({ length: 64 }).notNull(),
  createdBy: uuid().references(() => users.id),
  createdAt: createdAt(),
  inUseSince: instant(),
  /** of its notes */
  revision: revision(),
}, t => [
  primaryKey({ columns: [t.studioId, t.id] }),
  unique('curves_of_bench').on(t.studioId, t.benchId, t.id),
  unique('curves_version').on(t.studioId, t.benchId, t.version),
  uniqueIndex('curves_one_in_use').on(t.studioId, t.benchId).where(sql`${t.state} = 'in-use'`),
  foreignKey({ columns: [t.studioId, t.benchId], foreignColumns: [benches.studioId, benches.id] }),
  check('curves_state', sql`${t.state} in ('draft', 'in-use', 'retired')`),
])
