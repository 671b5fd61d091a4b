import { bigint, boolean, index, jsonb, pgTable, text, unique, uuid, varchar } from 'drizzle-orm/pg-core'
import { limits } from '../../../shared/schemas/limits'
import { createdAt, instant } from './columns'
import { sessions, users } from './people'

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

/** Who somebody is at an OpenID Connect provider. */
export const identities = pgTable('identities', {
  id: uuid().primaryKey(),
  userId: uuid().notNull().references(() => users.id),
  issuer: varchar({ length: 500 }).notNull(),
  /** at most 255 ASCII characters (OpenID Connect Core 1.0, 2) */
  subject: varchar({ length: 255 }).notNull(),
  createdAt: createdAt(),
  lastUsedAt: instant().notNull(),
}, t => [unique('identities_subject').on(t.issuer, t.subject), index('identities_user').on(t.userId)])

/** A sign-in that has gone to the provider and is not back yet; a cookie's secret finds its row, which is taken away as it is used. */
export const openIdSignIns = pgTable('openid_sign_ins', {
  secretHash: varchar({ length: 64 }).primaryKey(),
  state: varchar({ length: 64 }).notNull(),
  nonce: varchar({ length: 64 }).notNull(),
  codeVerifier: varchar({ length: 128 }).notNull(),
  /** where the person goes afterwards */
  next: varchar({ length: limits.lineLength }),
  invitationHash: varchar({ length: 64 }),
  /** the session to be made fresh; null for a sign-in */
  againSessionId: uuid().references(() => sessions.id, { onDelete: 'cascade' }),
  createdAt: createdAt(),
  expiresAt: instant().notNull(),
}, t => [index('openid_sign_ins_expiry').on(t.expiresAt)])
