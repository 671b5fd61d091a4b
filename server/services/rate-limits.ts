import { createHash } from 'node:crypto'
import { lt, sql } from 'drizzle-orm'
import { ComputeError } from '#shared/errors'
import { db } from '../db/client'
import { rateLimits } from '../db/schema'

/** At most `count` in a window of `seconds`, for each address, each account (or code), or each account from one address. */
export const limitRules = {
  register: [{ by: 'address', count: 30, seconds: 3600 }],
  login: [
    { by: 'address', count: 100, seconds: 900 },
    { by: 'account-and-address', count: 10, seconds: 900 },
    { by: 'account', count: 100, seconds: 900 },
  ],
  reset: [{ by: 'address', count: 20, seconds: 3600 }, { by: 'account', count: 5, seconds: 3600 }],
  passkey: [{ by: 'address', count: 200, seconds: 900 }],
  openid: [{ by: 'address', count: 100, seconds: 900 }],
  link: [{ by: 'address', count: 60, seconds: 900 }],
  password: [{ by: 'account', count: 10, seconds: 900 }],
  letters: [{ by: 'account', count: 60, seconds: 3600 }],
  // A whole class behind one address looks and joins within minutes; a code's guesses: some 11 500 a day from one address against 18^8.
  room: [{ by: 'address', count: 120, seconds: 900 }, { by: 'account', count: 300, seconds: 900 }],
  return: [{ by: 'address', count: 60, seconds: 900 }, { by: 'account', count: 10, seconds: 900 }],
  // Students are strangers: few letters to addresses that they type.
  account: [{ by: 'address', count: 60, seconds: 3600 }, { by: 'account', count: 5, seconds: 3600 }],
} as const satisfies Record<string, readonly { by: 'address' | 'account' | 'account-and-address', count: number, seconds: number }[]>
export type LimitedAction = keyof typeof limitRules

/** Counts one attempt in fixed windows kept in PostgreSQL, so that all processes count together. Throws `too_many_requests`. */
export async function countAgainstLimits(action: LimitedAction, address: string, account = ''): Promise<void> {
  for (const { by, count, seconds } of limitRules[action]) {
    const whom = { 'address': address, 'account': account, 'account-and-address': `${account} ${address}` }[by]
    const key = `${action}:${by}:${createHash('sha256').update(whom).digest('hex').slice(0, 40)}`
    const windowStart = sql`to_timestamp(floor(extract(epoch from now()) / ${seconds}) * ${seconds})`
    const [row] = await db().insert(rateLimits).values({ key, windowStart, count: 1 })
      .onConflictDoUpdate({ target: [rateLimits.key, rateLimits.windowStart], set: { count: sql`${rateLimits.count} + 1` } }).returning({ count: rateLimits.count })
    if (row!.count === 1) await db().delete(rateLimits).where(lt(rateLimits.windowStart, sql`now() - interval '1 day'`))
    if (row!.count > count) throw new ComputeError('too_many_requests', `Too many attempts. Wait ${Math.ceil(seconds / 60)} minutes, then try again.`)
  }
}
