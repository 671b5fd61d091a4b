import { sql } from 'drizzle-orm'
import { bigint, bigserial, boolean, check, index, integer, jsonb, pgTable, primaryKey, text, uniqueIndex, uuid, varchar } from 'drizzle-orm/pg-core'
import { limits } from '../../../shared/schemas/limits'
import type { LetterKind } from '../../../shared/schemas/letters'
import { createdAt, instant, revision } from './columns'

export const users = pgTable('users', {
  id: uuid().primaryKey(),
  name: varchar({ length: limits.nameLength }).notNull(),
  /** null for students of a class, who joined with a first name alone */
  email: varchar({ length: limits.emailLength }),
  passwordHash: text(),
  /** kinds of letters that this person does not want */
  lettersOff: jsonb().$type<LetterKind[]>().notNull().default([]),
  /** when the account and all that is its own will be erased; null while nobody asked for it */
  eraseAfter: instant(),
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
  eraseAfter: instant(),
  /** the invented studio that the start command makes; its owner can remove it at once */
  isDemo: boolean().notNull().default(false),
  createdAt: createdAt(),
  revision: revision(),
})

export const memberships = pgTable('memberships', {
  studioId: uuid().notNull().references(() => studios.id),
  userId: uuid().notNull().references(() => users.id),
  role: varchar({ length: 20, enum: ['member', 'technician', 'owner'] }).notNull(),
  createdAt: createdAt(),
}, t => [primaryKey({ columns: [t.studioId, t.userId] }), index('memberships_user').on(t.userId), check('memberships_role', sql`${t.role} in ('member', 'technician', 'owner')`)])

/** An offer to join a studio, sent by letter. Only the token's hash is kept. */
export const invitations = pgTable('invitations', {
  studioId: uuid().notNull().references(() => studios.id),
  id: uuid().notNull(),
  email: varchar({ length: limits.emailLength }).notNull(),
  role: varchar({ length: 20, enum: ['member', 'technician', 'owner'] }).notNull(),
  tokenHash: varchar({ length: 64 }).notNull().unique(),
  invitedBy: uuid().notNull().references(() => users.id),
  expiresAt: instant().notNull(),
  acceptedAt: instant(),
  acceptedBy: uuid().references(() => users.id),
  revokedAt: instant(),
  bodyHash: varchar({ length: 64 }).notNull(),
  createdAt: createdAt(),
}, t => [
  primaryKey({ columns: [t.studioId, t.id] }),
  uniqueIndex('invitations_open').on(t.studioId, sql`lower(${t.email})`).where(sql`${t.acceptedAt} is null and ${t.revokedAt} is null`),
])

/** What a letter lets its receiver do once: set a new password, confirm a new address. */
export const letterLinks = pgTable('letter_links', {
  id: uuid().primaryKey(),
  userId: uuid().notNull().references(() => users.id),
  kind: varchar({ length: 20, enum: ['password-reset', 'email-change'] }).notNull(),
  tokenHash: varchar({ length: 64 }).notNull().unique(),
  newEmail: varchar({ length: limits.emailLength }),
  expiresAt: instant().notNull(),
  usedAt: instant(),
  createdAt: createdAt(),
}, t => [index('letter_links_user').on(t.userId)])

/** Bearer tokens for scripts: only the hash is kept, and the first characters to tell them apart. */
export const tokens = pgTable('tokens', {
  id: uuid().primaryKey(),
  userId: uuid().notNull().references(() => users.id),
  name: varchar({ length: limits.nameLength }).notNull(),
  tokenHash: varchar({ length: 64 }).notNull().unique(),
  starts: varchar({ length: 12 }).notNull(),
  /** works in this studio only, and with this role at most */
  studioId: uuid().references(() => studios.id),
  roleCeiling: varchar({ length: 20, enum: ['member', 'technician', 'owner'] }),
  expiresAt: instant(),
  lastUsedAt: instant(),
  revokedAt: instant(),
  createdAt: createdAt(),
}, t => [index('tokens_user').on(t.userId)])

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
