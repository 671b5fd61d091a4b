import { sql } from 'drizzle-orm'
import { bigint, bigserial, check, index, integer, jsonb, pgTable, primaryKey, text, uniqueIndex, uuid, varchar } from 'drizzle-orm/pg-core'
import { limits } from '../../../shared/schemas/limits'
import { createdAt, instant, revision } from './columns'

export const users = pgTable('users', {
  id: uuid().primaryKey(),
  name: varchar({ length: limits.nameLength }).notNull(),
  email: varchar({ length: limits.emailLength }).notNull(),
  passwordHash: text(),
  createdAt: createdAt(),
}, t => [uniqueIndex('users_email').on(sql`lower(${t.email})`)])

/** A sealed cookie holds a row's id; without a live row there is no session. */
export const sessions = pgTable('sessions', {
  id: uuid().primaryKey(),
  userId: uuid().notNull().references(() => users.id),
  createdAt: createdAt(),
  /** when the person last proved who they are */
  freshAt: instant().notNull(),
  lastSeenAt: instant().notNull(),
  expiresAt: instant().notNull(),
  revokedAt: instant(),
}, t => [index('sessions_user').on(t.userId)])

export const studios = pgTable('studios', {
  id: uuid().primaryKey(),
  slug: varchar({ length: 80 }).notNull().unique(),
  name: varchar({ length: limits.nameLength }).notNull(),
  maxBytes: bigint({ mode: 'number' }).notNull(),
  createdAt: createdAt(),
  revision: revision(),
})

export const memberships = pgTable('memberships', {
  studioId: uuid().notNull().references(() => studios.id),
  userId: uuid().notNull().references(() => users.id),
  role: varchar({ length: 20, enum: ['member', 'technician', 'owner'] }).notNull(),
  createdAt: createdAt(),
}, t => [primaryKey({ columns: [t.studioId, t.userId] }), index('memberships_user').on(t.userId), check('memberships_role', sql`${t.role} in ('member', 'technician', 'owner')`)])

/** The audit trail: rows are added, never changed; a trigger sees to it. */
export const events = pgTable('events', {
  id: bigserial({ mode: 'number' }).primaryKey(),
  studioId: uuid(),
  userId: uuid(),
  kind: varchar({ length: 60 }).notNull(),
  recordId: uuid(),
  details: jsonb().$type<Record<string, unknown>>().notNull().default({}),
  at: createdAt(),
}, t => [index('events_studio').on(t.studioId, t.id)])

/** Fixed-window counters; `key` holds what is limited and for whom, hashed. */
export const rateLimits = pgTable('rate_limits', {
  key: varchar({ length: 100 }).notNull(),
  windowStart: instant().notNull(),
  count: integer().notNull(),
}, t => [primaryKey({ columns: [t.key, t.windowStart] })])
