import { and, eq, gt, lt, sql } from 'drizzle-orm'
import { buildAuthorizationUrl, calculatePKCECodeChallenge, randomNonce, randomPKCECodeVerifier, randomState } from 'openid-client'
import { v7 as uuidv7 } from 'uuid'
import { ComputeError } from '#shared/errors'
import { limits } from '#shared/schemas/limits'
import type { User } from '#shared/schemas/people'
import { db, type Transaction } from '../db/client'
import { identities, openIdSignIns, sessions, users } from '../db/schema'
import { identityLinkedLetter } from '../mail/letters'
import { recordEvent } from './audit'
import { joinByInvitationHash } from './invitations'
import { postLetter } from './letters'
import { claimsFrom, openIdName, provider, type Claims } from './openid-provider'
import { publicOrigin } from './origin'
import { addPerson, signInAs, studiosOf } from './people'
import { hashOfSecret, newSecret } from './secrets'
import { freshenSession } from './sessions'

export const openIdMinutes = 10
const backPath = '/api/auth/openid/back'

type Pending = typeof openIdSignIns.$inferSelect
export interface Begun { url: string, secret: string }
interface Wish { next?: string, invitationToken?: string, againSessionId?: string }

/** Begins a sign-in: where the browser goes, and the secret that its cookie keeps until it is back. */
export async function beginOpenId({ next, invitationToken, againSessionId }: Wish): Promise<Begun> {
  const configuration = await provider()
  const [state, nonce, codeVerifier] = [randomState(), randomNonce(), randomPKCECodeVerifier()]
  const { secret, hash } = newSecret()
  await db().delete(openIdSignIns).where(lt(openIdSignIns.expiresAt, sql`now()`))
  await db().insert(openIdSignIns).values({
    secretHash: hash, state, nonce, codeVerifier, next, againSessionId, invitationHash: invitationToken && hashOfSecret(invitationToken),
    expiresAt: sql`now() + make_interval(mins => ${openIdMinutes})`,
  })
  const url = buildAuthorizationUrl(configuration, {
    redirect_uri: `${publicOrigin()}${backPath}`, scope: 'openid email profile', state, nonce,
    code_challenge: await calculatePKCECodeChallenge(codeVerifier), code_challenge_method: 'S256',
    ...againSessionId ? { prompt: 'login', max_age: '0' } : {},
  })
  return { url: url.href, secret }
}

/** What came back from the provider, as the query of its address: a session (unless one was only made fresh), and the page to go on to. */
export async function finishOpenId(secret: string | undefined, query: string, sessionId: string | undefined): Promise<{ path: string, sessionId?: string }> {
  const pending = await takePending(secret)
  const claims = await claimsFrom(new URL(`${publicOrigin()}${backPath}${query}`), pending)
  if (pending.againSessionId) return await freshen(pending, claims, sessionId)
  return await db().transaction(async (tx) => {
    const { user, joined } = await personOf(tx, claims, pending.invitationHash ?? undefined)
    const signedIn = await signInAs(tx, user)
    return { sessionId: signedIn.sessionId, path: joined ?? pending.next ?? await firstPage(user.id) }
  })
}

async function firstPage(userId: string): Promise<string> {
  const [studio] = await studiosOf(userId)
  return studio ? `/s/${studio.slug}` : '/account'
}

/** Works once, whatever comes of it. */
async function takePending(secret: string | undefined): Promise<Pending> {
  const [pending] = await db().delete(openIdSignIns).where(and(eq(openIdSignIns.secretHash, hashOfSecret(secret ?? '')), gt(openIdSignIns.expiresAt, sql`now()`))).returning()
  if (!pending) throw new ComputeError('openid_void', 'This sign-in took longer than ten minutes, or was begun in another browser. Start again.')
  return pending
}

/** Clocks of two machines may differ by so much. */
const clockToleranceSeconds = 60

/** The same person, at the provider, after they were asked: an old sign-in there proves nothing of now. */
async function freshen({ againSessionId, createdAt, next }: Pending, claims: Claims, sessionId: string | undefined): Promise<{ path: string }> {
  const [known] = await db().select({ id: identities.id }).from(identities)
    .innerJoin(sessions, eq(sessions.userId, identities.userId))
    .where(and(eq(sessions.id, againSessionId!), eq(identities.issuer, claims.issuer), eq(identities.subject, claims.subject)))
  const isRecent = claims.signedInAt !== undefined && claims.signedInAt >= createdAt.getTime() / 1000 - clockToleranceSeconds
  if (!known || sessionId !== againSessionId || !isRecent) throw new ComputeError('openid_refused', `${openIdName()} did not show that it is you, here and now. Go back and try again.`)
  await freshenSession(db(), againSessionId!)
  return { path: next ?? '/account' }
}

/** Somebody known, somebody whose verified address has an account, or somebody new. */
async function personOf(tx: Transaction, claims: Claims, invitationHash: string | undefined): Promise<{ user: User, joined?: string }> {
  const user = await knownPerson(tx, claims) ?? await linkedPerson(tx, claims)
  if (user) return { user, joined: invitationHash && `/s/${(await joinByInvitationHash(tx, user.id, invitationHash)).slug}` }
  const email = claims.email!
  const added = await addPerson(tx, { name: (claims.name ?? email.split('@')[0]!).slice(0, limits.nameLength), email, passwordHash: null, invitationHash })
  await keepIdentity(tx, added.user.id, claims)
  return { user: added.user, joined: `/s/${added.studio.slug}` }
}

async function knownPerson(tx: Transaction, { issuer, subject }: Claims): Promise<User | undefined> {
  const [known] = await tx.update(identities).set({ lastUsedAt: sql`now()` }).where(and(eq(identities.issuer, issuer), eq(identities.subject, subject))).returning()
  if (!known) return undefined
  const [user] = await tx.select({ id: users.id, name: users.name, email: users.email }).from(users).where(eq(users.id, known.userId))
  return user
}

/** The account of a verified address. Only the provider that whoever runs the installation has named can say so. */
async function linkedPerson(tx: Transaction, claims: Claims): Promise<User | undefined> {
  const email = claims.email
  if (!email || !claims.emailVerified || email.length > limits.emailLength) throw new ComputeError('openid_unverified', `${openIdName()} has not confirmed your e-mail address. Have it confirmed there, or sign in another way.`)
  const [user] = await tx.select({ id: users.id, name: users.name, email: users.email }).from(users).where(eq(sql`lower(${users.email})`, email.toLowerCase()))
  if (!user) return undefined
  await keepIdentity(tx, user.id, claims)
  await postLetter(tx, { kind: 'account-notice', to: user.email, userId: user.id, content: identityLinkedLetter({ provider: openIdName()! }) })
  return user
}

async function keepIdentity(tx: Transaction, userId: string, { issuer, subject }: Claims): Promise<void> {
  const id = uuidv7()
  await tx.insert(identities).values({ id, userId, issuer, subject, lastUsedAt: sql`now()` })
  await recordEvent(tx, { userId, kind: 'identity.linked', recordId: id })
}
