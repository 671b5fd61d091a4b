import { and, eq } from 'drizzle-orm'
import { ComputeError } from '#shared/errors'
import { readSettings } from '../config'
import { db, type Queryable } from '../db/client'
import { identities, passkeys, users } from '../db/schema'
import { openIdName } from './openid-provider'
import { passkeyPlace } from './passkey-place'

/** What the sign-in screen may offer. */
export function waysIn() {
  const name = openIdName()
  return { passkeys: { origin: passkeyPlace()?.origin ?? null }, openId: name === null ? null : { name } }
}

export async function waysInOf(userId: string, on: Queryable = db()): Promise<{ password: boolean, passkeys: number, openId: boolean }> {
  const { OIDC_ISSUER } = readSettings()
  const [user] = await on.select({ passwordHash: users.passwordHash }).from(users).where(eq(users.id, userId))
  return {
    password: Boolean(user?.passwordHash),
    passkeys: await on.$count(passkeys, eq(passkeys.userId, userId)),
    openId: OIDC_ISSUER !== undefined && await on.$count(identities, and(eq(identities.userId, userId), eq(identities.issuer, OIDC_ISSUER))) > 0,
  }
}

/** Asked for once one is taken away: whoever loses the last could not come back. */
export async function requireOtherWayIn(on: Queryable, userId: string): Promise<void> {
  const { password, passkeys, openId } = await waysInOf(userId, on)
  if (!password && passkeys === 0 && !openId) throw new ComputeError('last_way_in', 'This is your only way of signing in. Set a password or add another passkey first.')
}
