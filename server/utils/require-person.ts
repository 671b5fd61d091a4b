import type { H3Event } from 'h3'
import { ComputeError } from '#shared/errors'
import type { Person } from '../services/access'
import { personOfSession } from '../services/sessions'
import { bearerToken } from './foreign-origin'
import { sessionIdOf } from './session-cookie'

const freshSeconds = 600

/** Who calls. A Bearer header makes cookies count for nothing; no token is known yet, so it answers 401. */
export async function requirePerson(event: H3Event): Promise<Person> {
  const sessionId = bearerToken(event) === undefined ? await sessionIdOf(event) : undefined
  const person = sessionId && await personOfSession(sessionId)
  if (!person) throw new ComputeError('not_signed_in', 'Sign in first.')
  return person
}

export function requireFreshSession(person: Person): void {
  if (Date.now() - person.freshAt.getTime() > freshSeconds * 1000) {
    throw new ComputeError('fresh_sign_in_required', 'Sign in again to do this: the last sign-in is more than ten minutes ago.')
  }
}
