import { eq } from 'drizzle-orm'
import { ComputeError } from '#shared/errors'
import { db, type Queryable } from '../db/client'
import { passkeys, users } from '../db/schema'
import { passkeyPlace } from './passkey-place'

/** What the sign-in screen may offer. */
export const waysIn = () => ({ passkeys: { origin: passkeyPlace()?.origin ?? null } })

export async function waysInOf(userId: string, on: Queryable = db()): Promise<{ password: boolean, passkeys: number }> {
  const [user] = await on.select({ passwordHash: users.passwordHash }).from(users).where(eq(users.id, userId))
  return { password: Boolean(user?.passwordHash), passkeys: await on.$count(passkeys, eq(passkeys.userId, userId)) }
}

/** Asked for once one is taken away: whoever loses the last could not come back. */
export async function requireOtherWayIn(on: Queryable, userId: string): Promise<void> {
  const { password, passkeys } = await waysInOf(userId, on)
  if (!password && passkeys === 0) throw new ComputeError('last_way_in', 'This is your only way of signing in. Set a password or add another passkey first.')
}
