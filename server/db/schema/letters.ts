import { sql } from 'drizzle-orm'
import { index, integer, pgTable, text, uuid, varchar } from 'drizzle-orm/pg-core'
import { letterKinds } from '../../../shared/schemas/letters'
import { limits } from '../../../shared/schemas/limits'
import { createdAt, instant } from './columns'
import { studios, users } from './people'

/**
 * The outbox: a letter is written in the transaction of what it tells of, and sent afterwards. Its text holds links that
 * open things, so it is emptied once the letter has gone.
 */
export const letters = pgTable('letters', {
  id: uuid().primaryKey(),
  kind: varchar({ length: 30, enum: letterKinds }).notNull(),
  userId: uuid().references(() => users.id),
  studioId: uuid().references(() => studios.id),
  toAddress: varchar({ length: limits.emailLength }).notNull(),
  subject: text().notNull(),
  text: text().notNull(),
  html: text().notNull(),
  /** the same at every attempt, so that a mail server can drop a second one (RFC 5322, 3.6.4) */
  messageId: varchar({ length: 120 }).notNull().unique(),
  state: varchar({ length: 10, enum: ['waiting', 'sending', 'sent', 'failed'] }).notNull(),
  attempts: integer().notNull().default(0),
  /** when it may be tried (again); while it is being sent, when another worker may take it up */
  notBefore: instant().notNull().default(sql`now()`),
  lastError: text(),
  createdAt: createdAt(),
  sentAt: instant(),
}, t => [index('letters_open').on(t.notBefore).where(sql`${t.state} in ('waiting', 'sending')`)])
