import { sql } from 'drizzle-orm'
import { integer, timestamp, uuid } from 'drizzle-orm/pg-core'

// Relative imports only in this folder: drizzle-kit resolves no aliases.

export const instant = () => timestamp({ withTimezone: true, mode: 'date' })
export const createdAt = () => instant().notNull().default(sql`now()`)
export const revision = () => integer().notNull().default(1)
export const studioId = () => uuid().notNull()
