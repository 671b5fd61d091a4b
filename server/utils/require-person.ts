import type { H3Event } from 'h3'
import { ComputeError } from '#shared/errors'
import type { Person } from '../services/access'
import { personOfSession } from '../services/sessions'
import { personOfToken } from '../services/tokens'
import { bearerToken } from './foreign-origin'
import { sessionIdOf } from './session-cookie'

const freshSeconds = 600

/** Who calls: a Bearer header makes cookies count for nothing. */
export async function requirePerson(event: H3Event): Promise<Person> {
  const person = await callerOf(event)
  if (!person) throw new ComputeError('not_signed_in', 'Sign in first.')
  return person
}

async function callerOf(event: H3Event): Promise<Person | undefined> {
  const token = bearerToken(event)
  if (token !== undefined) return personOfToken(token)
  const sessionId = await sessionIdOf(event)
  return sessionId === undefined ? undefined : personOfSession(sessionId)
}

/** Passwords, addresses, tokens and erasure are no business of scripts. */
export function requireSession(person: Person): asserts person is Person & { session: NonNullable<Person['session']> } {
  if (!person.session) throw new ComputeError('session_required', 'A token does not do for this. Sign in at a screen.')
}

export function requireFreshSession(person: Person): void {
  requireSession(person)
  if (Date.now() - person.session.freshAt.getTime() > freshSeconds * 1000) {
    throw new ComputeError('fresh_sign_in_required', 'Sign in again to do this: the last sign-in is more than ten minutes ago.')
  }
}
