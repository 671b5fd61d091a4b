import { jsonb, pgTable, primaryKey, text, uuid, varchar } from 'drizzle-orm/pg-core'
import { limits } from '../../../shared/schemas/limits'
import type { ShelfFacts, ShelfKind } from '../../../shared/schemas/shelf-facts'
import { createdAt, instant, revision, studioId } from './columns'
import { studios } from './people'

const shelfTable = <K extends ShelfKind>(name: K) => pgTable(name, {
  studioId: studioId().references(() => studios.id),
  id: uuid().notNull(),
  name: varchar({ length: limits.nameLength }).notNull(),
  notes: text().notNull().default(''),
  facts: jsonb().$type<ShelfFacts[K]>().notNull().default({}),
  bodyHash: varchar({ length: 64 }).notNull(),
  archivedAt: instant(),
  createdAt: createdAt(),
  revision: revision(),
}, t => [primaryKey({ columns: [t.studioId, t.id] })])

export const papers = shelfTable('papers')
export const sensitizers = shelfTable('sensitizers')
export const films = shelfTable('films')
export const inkjets = shelfTable('inkjets')
export const lamps = shelfTable('lamps')
export const scanners = shelfTable('scanners')
