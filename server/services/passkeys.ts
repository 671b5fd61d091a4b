import { generateAuthenticationOptions, generateRegistrationOptions, verifyAuthenticationResponse, verifyRegistrationResponse } from '@simplewebauthn/server'
import { and, asc, eq, sql } from 'drizzle-orm'
import { parse as bytesOfUuid, v7 as uuidv7 } from 'uuid'
import type { z } from 'zod'
import { ComputeError } from '#shared/errors'
import { limits } from '#shared/schemas/limits'
import type { assertion, newCredential, Passkey } from '#shared/schemas/passkeys'
import type { User } from '#shared/schemas/people'
import { db, type Transaction } from '../db/client'
import { passkeys, users } from '../db/schema'
import { passkeyAddedLetter, passkeyRemovedLetter } from '../mail/letters'
import { recordEvent } from './audit'
import { postLetter } from './letters'
import { newChallenge, takeChallenge } from './passkey-challenges'
import { requirePasskeyPlace } from './passkey-place'
import { signInAs, type SignedIn } from './people'
import { requireFound } from './revisions'
import { freshenSession } from './sessions'
import { requireOtherWayIn } from './ways-in'

type PasskeyRow = typeof passkeys.$inferSelect
type Transport = NonNullable<z.output<typeof newCredential>['response']['transports']>[number]

const show = ({ id, name, backedUp, createdAt, lastUsedAt }: PasskeyRow): Passkey =>
  ({ id, name, backedUp, createdAt: createdAt.toISOString(), lastUsedAt: lastUsedAt?.toISOString() ?? null })
const rowsOf = (userId: string) => db().select().from(passkeys).where(eq(passkeys.userId, userId)).orderBy(asc(passkeys.createdAt), asc(passkeys.id))
const forBrowser = (rows: PasskeyRow[]) => rows.map(row => ({ id: row.credentialId, transports: row.transports as Transport[] }))
/** What an authenticator keeps beside its key, to say whose it is. */
const userHandle = (userId: string) => new Uint8Array(bytesOfUuid(userId))

export const listPasskeys = async (userId: string): Promise<Passkey[]> => (await rowsOf(userId)).map(show)

/** Students of a class have no address, and no passkeys. */
type Holder = User & { email: string }

export async function optionsToAdd(user: Holder) {
  const { rpId } = requirePasskeyPlace()
  return await generateRegistrationOptions({
    rpName: 'Emulside', rpID: rpId, userName: user.email, userDisplayName: user.name, userID: userHandle(user.id),
    challenge: await newChallenge('register', user.id), attestationType: 'none', excludeCredentials: forBrowser(await rowsOf(user.id)),
    // It alone signs in: it must be found without a name typed before, and ask for finger, face or PIN.
    authenticatorSelection: { residentKey: 'required', userVerification: 'required' },
  })
}

export async function addPasskey(user: Holder, { name, credential }: { name: string, credential: z.output<typeof newCredential> }): Promise<Passkey> {
  const made = await checkNew(credential, await takeChallenge('register', credential.response.clientDataJSON, user.id))
  return await db().transaction(async (tx) => {
    await lockPerson(tx, user.id)
    if (await tx.$count(passkeys, eq(passkeys.userId, user.id)) >= limits.passkeysPerPerson) throw new ComputeError('wrong_state', `An account has ${limits.passkeysPerPerson} passkeys at most. Remove one that you no longer use.`)
    const [row] = await tx.insert(passkeys).values({
      id: uuidv7(), userId: user.id, name, credentialId: made.credential.id, publicKey: Buffer.from(made.credential.publicKey).toString('base64url'),
      counter: made.credential.counter, transports: credential.response.transports ?? [], backedUp: made.credentialBackedUp,
    }).onConflictDoNothing().returning()
    if (!row) throw new ComputeError('passkey_refused', 'This passkey belongs to an account already. Make a new one.')
    await recordEvent(tx, { userId: user.id, kind: 'passkey.added', recordId: row.id })
    await postLetter(tx, { kind: 'account-notice', to: user.email, userId: user.id, content: passkeyAddedLetter({ name }) })
    return show(row)
  })
}

async function checkNew(response: z.output<typeof newCredential>, expectedChallenge: string) {
  const { origin, rpId } = requirePasskeyPlace()
  const { registrationInfo } = await orRefuse(verifyRegistrationResponse({ response, expectedChallenge, expectedOrigin: origin, expectedRPID: rpId, requireUserVerification: true }))
  return registrationInfo ?? refuse()
}

export async function removePasskey(user: User, id: string): Promise<void> {
  await db().transaction(async (tx) => {
    await lockPerson(tx, user.id)
    const [row] = await tx.delete(passkeys).where(and(eq(passkeys.userId, user.id), eq(passkeys.id, id))).returning()
    const { name } = requireFound(row)
    await requireOtherWayIn(tx, user.id)
    await recordEvent(tx, { userId: user.id, kind: 'passkey.removed', recordId: id })
    await postLetter(tx, { kind: 'account-notice', to: user.email, userId: user.id, content: passkeyRemovedLetter({ name }) })
  })
}

/** Changes of a person's ways in wait for one another, so that two removals can't leave none. */
async function lockPerson(tx: Transaction, userId: string): Promise<void> {
  await tx.select({ id: users.id }).from(users).where(eq(users.id, userId)).for('no key update')
}

export async function optionsToSignIn() {
  return await generateAuthenticationOptions({ rpID: requirePasskeyPlace().rpId, challenge: await newChallenge('sign-in'), userVerification: 'required' })
}

export async function signInByPasskey(credential: z.output<typeof assertion>): Promise<SignedIn> {
  const challenge = await takeChallenge('sign-in', credential.response.clientDataJSON)
  return await db().transaction(async tx => signInAs(tx, await holderOf(tx, credential, challenge)))
}

export async function optionsToSignInAgain(userId: string) {
  const allowCredentials = forBrowser(await rowsOf(userId))
  return await generateAuthenticationOptions({ rpID: requirePasskeyPlace().rpId, challenge: await newChallenge('sign-in-again', userId), userVerification: 'required', allowCredentials })
}

export async function signInAgainByPasskey(userId: string, sessionId: string, credential: z.output<typeof assertion>): Promise<void> {
  const challenge = await takeChallenge('sign-in-again', credential.response.clientDataJSON, userId)
  await db().transaction(async (tx) => {
    if ((await holderOf(tx, credential, challenge)).id !== userId) refuse()
    await freshenSession(tx, sessionId)
  })
}

/** Whose passkey has signed the challenge. The row is locked: of two answers with the same count one is refused. */
async function holderOf(tx: Transaction, response: z.output<typeof assertion>, expectedChallenge: string): Promise<User> {
  const { origin, rpId } = requirePasskeyPlace()
  const [row] = await tx.select().from(passkeys).where(eq(passkeys.credentialId, response.id)).for('update')
  const handle = response.response.userHandle
  if (!row || (handle !== undefined && handle !== Buffer.from(userHandle(row.userId)).toString('base64url'))) refuse()
  const credential = { id: row.credentialId, publicKey: new Uint8Array(Buffer.from(row.publicKey, 'base64url')), counter: row.counter }
  const { verified, authenticationInfo } = await orRefuse(verifyAuthenticationResponse({ response, credential, expectedChallenge, expectedOrigin: origin, expectedRPID: rpId, requireUserVerification: true }))
  if (!verified) refuse()
  await tx.update(passkeys).set({ counter: authenticationInfo.newCounter, backedUp: authenticationInfo.credentialBackedUp, lastUsedAt: sql`now()` }).where(eq(passkeys.id, row.id))
  const [user] = await tx.select({ id: users.id, name: users.name, email: users.email }).from(users).where(eq(users.id, row.userId))
  return user!
}

function refuse(): never {
  throw new ComputeError('passkey_refused', 'This passkey was not accepted: it is not kept here, was made for another address, or could not prove itself. Use another, or your password.')
}

/** The library throws for each thing that is not as it should be; which one is nothing that a person could act on. */
const orRefuse = <T>(checking: Promise<T>): Promise<T> => checking.catch(refuse)
