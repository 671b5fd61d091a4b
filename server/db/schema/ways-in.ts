import { bigint, boolean, index, jsonb, pgTable, text, uuid, varchar } from 'drizzle-orm/pg-core'
import { limits } from '../../../shared/schemas/limits'
import { createdAt, instant } from './columns'
import { users } from './people'

/** Passkeys of people: the public half, and how often the authenticator says it has signed. */
export const passkeys = pgTable('passkeys', {
  id: uuid().primaryKey(),
  userId: uuid().notNull().references(() => users.id),
  name: varchar({ length: limits.nameLength }).notNull(),
  credentialId: varchar({ length: limits.credentialIdLength }).notNull().unique(),
  /** COSE key, base64url */
  publicKey: text().notNull(),
  /** 32 bits without sign */
  counter: bigint({ mode: 'number' }).notNull(),
  transports: jsonb().$type<string[]>().notNull().default([]),
  /** kept by a service of its maker's, so that it outlives the device */
  backedUp: boolean().notNull(),
  createdAt: createdAt(),
  lastUsedAt: instant(),
}, t => [index('passkeys_user').on(t.userId)])

/** What an authenticator is asked to sign. A row is taken away as it is used. */
export const passkeyChallenges = pgTable('passkey_challenges', {
  challenge: varchar({ length: 64 }).primaryKey(),
  purpose: varchar({ length: 20, enum: ['register', 'sign-in', 'sign-in-again'] }).notNull(),
  /** whose it is; null for somebody who has yet to say who they are */
  userId: uuid().references(() => users.id),
  expiresAt: instant().notNull(),
}, t => [index('passkey_challenges_expiry').on(t.expiresAt)])
