import { sql } from 'drizzle-orm'
import { boolean, foreignKey, jsonb, pgTable, primaryKey, uniqueIndex, uuid, varchar } from 'drizzle-orm/pg-core'
import type { z } from 'zod'
import type { ink, path, recipe } from '../../../shared/schemas/benches'
import { processes, readingChannels } from '../../../shared/schemas/benches'
import { limits } from '../../../shared/schemas/limits'
import { createdAt, instant, revision, studioId } from './columns'
import { studios } from './people'
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
