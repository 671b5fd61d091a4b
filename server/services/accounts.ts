import { and, eq, gt, isNull, sql } from 'drizzle-orm'
import { v7 as uuidv7 } from 'uuid'
import { ComputeError } from '#shared/errors'
import type { User } from '#shared/schemas/people'
import { db, type Transaction } from '../db/client'
import { letterLinks, users } from '../db/schema'
import { addressChangedLetter, confirmAddressLetter, passwordChangedLetter, resetLetter } from '../mail/letters'
import { recordEvent } from './audit'
import { keepStudent } from './class-students'
import { postLetter } from './letters'
import { publicOrigin } from './origin'
import { hashPassword, passwordMatches } from './passwords'
import { signInAs, type SignedIn } from './people'
import { hashOfSecret, newSecret } from './secrets'
import { freshenSession, revokeSessionsOf } from './sessions'

const linkMinutes = 60

/** Passwords and addresses of accounts: what a letter's link, or a fresh sign-in, lets a person do. */

export async function signInAgain(userId: string, sessionId: string, password: string): Promise<void> {
  const [found] = await db().select({ passwordHash: users.passwordHash }).from(users).where(eq(users.id, userId))
  if (!await passwordMatches(found?.passwordHash, password)) throw new ComputeError('wrong_credentials', 'This is not your password. Try again, or sign out and ask for a new one.')
  await freshenSession(db(), sessionId)
}

export async function changeName(userId: string, name: string): Promise<User> {
  const [user] = await db().update(users).set({ name }).where(eq(users.id, userId)).returning({ id: users.id, name: users.name, email: users.email })
  return user!
}

export async function changePassword(user: User, sessionId: string, password: string): Promise<void> {
  const passwordHash = await hashPassword(password)
  await db().transaction(async (tx) => {
    await setPassword(tx, user.id, passwordHash)
    await revokeSessionsOf(tx, user.id, sessionId)
    await postLetter(tx, { kind: 'account-notice', to: user.email, userId: user.id, content: passwordChangedLetter() })
  })
}

async function setPassword(tx: Transaction, userId: string, passwordHash: string): Promise<void> {
  await tx.update(users).set({ passwordHash }).where(eq(users.id, userId))
  // Links of before may be in the hands of whoever knew the old password.
  await tx.update(letterLinks).set({ usedAt: sql`now()` }).where(and(eq(letterLinks.userId, userId), isNull(letterLinks.usedAt)))
  await recordEvent(tx, { userId, kind: 'person.password-changed', recordId: userId })
}

/** Says nothing of whether there is such an account. */
export async function requestReset(email: string): Promise<void> {
  await db().transaction(async (tx) => {
    const [user] = await tx.select({ id: users.id, email: users.email }).from(users).where(eq(sql`lower(${users.email})`, email.trim().toLowerCase()))
    if (!user) return
    const secret = await newLink(tx, user.id, 'password-reset')
    await postLetter(tx, { kind: 'password-reset', to: user.email, userId: user.id, content: resetLetter({ url: `${publicOrigin()}/new-password#${secret}`, minutes: linkMinutes }) })
  })
}

/** By the letter's link: a new password, all sessions of before ended, and a new one. */
export async function resetPassword(token: string, password: string): Promise<SignedIn> {
  const passwordHash = await hashPassword(password)
  return await db().transaction(async (tx) => {
    const { userId } = await takeLink(tx, token, 'password-reset')
    await setPassword(tx, userId, passwordHash)
    await revokeSessionsOf(tx, userId)
    const user = await userOf(tx, userId)
    await postLetter(tx, { kind: 'account-notice', to: user.email, userId, content: passwordChangedLetter() })
    return await signInAs(tx, user)
  })
}

/** A student's own account: it has its password at once and its address once the letter's link was followed; until then the class's rules hold. */
export async function becomeAccount(user: User, { email, password }: { email: string, password: string }): Promise<void> {
  if (user.email !== null) throw new ComputeError('wrong_state', 'This is an account with an address already.')
  const passwordHash = await hashPassword(password)
  await db().transaction(async (tx) => {
    await askForAddress(tx, user, email)
    await tx.update(users).set({ passwordHash }).where(eq(users.id, user.id))
  })
}

/** A letter to the new address; the account keeps the old one until its link is followed. */
export const requestEmailChange = (user: User, newEmail: string): Promise<void> => db().transaction(tx => askForAddress(tx, user, newEmail))

async function askForAddress(tx: Transaction, user: User, newEmail: string): Promise<void> {
  await requireFreeAddress(tx, newEmail)
  const secret = await newLink(tx, user.id, 'email-change', newEmail)
  await postLetter(tx, { kind: 'email-change', to: newEmail, userId: user.id, content: confirmAddressLetter({ url: `${publicOrigin()}/confirm-address#${secret}`, minutes: linkMinutes }) })
}

export async function confirmEmail(token: string): Promise<User> {
  return await db().transaction(async (tx) => {
    const { userId, newEmail } = await takeLink(tx, token, 'email-change')
    const before = await userOf(tx, userId)
    await requireFreeAddress(tx, newEmail!)
    await tx.update(users).set({ email: newEmail! }).where(eq(users.id, userId))
    await keepStudent(tx, userId)
    await recordEvent(tx, { userId, kind: 'person.address-changed', recordId: userId })
    await postLetter(tx, { kind: 'account-notice', to: before.email, userId, content: addressChangedLetter({ to: newEmail! }) })
    return { ...before, email: newEmail! }
  })
}

async function requireFreeAddress(tx: Transaction, email: string): Promise<void> {
  const [taken] = await tx.select({ id: users.id }).from(users).where(eq(sql`lower(${users.email})`, email.toLowerCase()))
  if (taken) throw new ComputeError('email_taken', 'An account has this address already.', [{ path: 'email', message: 'Is taken.' }])
}

async function userOf(tx: Transaction, id: string): Promise<User> {
  const [user] = await tx.select({ id: users.id, name: users.name, email: users.email }).from(users).where(eq(users.id, id))
  return user!
}

/** The newest link of a kind counts; those before it stop working. */
async function newLink(tx: Transaction, userId: string, kind: 'password-reset' | 'email-change', newEmail?: string): Promise<string> {
  await tx.update(letterLinks).set({ usedAt: sql`now()` }).where(and(eq(letterLinks.userId, userId), eq(letterLinks.kind, kind), isNull(letterLinks.usedAt)))
  const { secret, hash } = newSecret()
  await tx.insert(letterLinks).values({ id: uuidv7(), userId, kind, tokenHash: hash, newEmail, expiresAt: sql`now() + make_interval(mins => ${linkMinutes})` })
  return secret
}

/** Used up in the same transaction as what it does. */
async function takeLink(tx: Transaction, token: string, kind: 'password-reset' | 'email-change'): Promise<{ userId: string, newEmail: string | null }> {
  const [link] = await tx.update(letterLinks).set({ usedAt: sql`now()` })
    .where(and(eq(letterLinks.tokenHash, hashOfSecret(token)), eq(letterLinks.kind, kind), isNull(letterLinks.usedAt), gt(letterLinks.expiresAt, sql`now()`))).returning()
  if (!link) throw new ComputeError('link_void', 'This link no longer works: it was used, is too old, or a newer letter has been sent. Ask for a new letter.')
  return link
}
