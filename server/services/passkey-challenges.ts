import { randomBytes } from 'node:crypto'
import { and, eq, gt, isNull, lt, sql } from 'drizzle-orm'
import { ComputeError } from '#shared/errors'
import { db } from '../db/client'
import { passkeyChallenges } from '../db/schema'

const challengeMinutes = 5
export type ChallengePurpose = typeof passkeyChallenges.$inferSelect['purpose']

/** Keeps a new challenge, and sweeps those that nobody answered in time. */
export async function newChallenge(purpose: ChallengePurpose, userId?: string): Promise<Uint8Array<ArrayBuffer>> {
  const bytes = new Uint8Array(randomBytes(32))
  await db().delete(passkeyChallenges).where(lt(passkeyChallenges.expiresAt, sql`now()`))
  await db().insert(passkeyChallenges).values({ challenge: Buffer.from(bytes).toString('base64url'), purpose, userId, expiresAt: sql`now() + make_interval(mins => ${challengeMinutes})` })
  return bytes
}

/**
 * Takes the challenge that a browser has signed, which works once: not within the transaction of what follows,
 * so that it is gone even where the rest is refused.
 */
export async function takeChallenge(purpose: ChallengePurpose, clientDataJSON: string, userId?: string): Promise<string> {
  const [taken] = await db().delete(passkeyChallenges).where(and(
    eq(passkeyChallenges.challenge, challengeIn(clientDataJSON)), eq(passkeyChallenges.purpose, purpose), gt(passkeyChallenges.expiresAt, sql`now()`),
    userId === undefined ? isNull(passkeyChallenges.userId) : eq(passkeyChallenges.userId, userId),
  )).returning({ challenge: passkeyChallenges.challenge })
  if (!taken) throw new ComputeError('passkey_refused', 'That took longer than five minutes, or was sent twice. Try the passkey once more.')
  return taken.challenge
}

/** A challenge that could be ours, or none. */
function challengeIn(clientDataJSON: string): string {
  try {
    const { challenge } = JSON.parse(Buffer.from(clientDataJSON, 'base64url').toString('utf8')) as { challenge?: unknown }
    return typeof challenge === 'string' && /^[\w-]{43}$/.test(challenge) ? challenge : ''
  }
  catch {
    return ''
  }
}
