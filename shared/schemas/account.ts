import { z } from 'zod'
import { endpoint } from './endpoint'
import { switchableLetters } from './letters'
import { letterToken, me, newPassword, password, role, user, email } from './people'
import { id, instant, name } from './primitives'

export const tokenBody = z.strictObject({ name, expiresAt: instant.optional(), studioId: id.optional(), roleCeiling: role.optional() })
export const token = z.object({ id, name: z.string(), starts: z.string(), studioId: id.nullable(), roleCeiling: role.nullable(), expiresAt: instant.nullable(), lastUsedAt: instant.nullable(), createdAt: instant })
export type Token = z.infer<typeof token>
export const session = z.object({ id, isThis: z.boolean(), createdAt: instant, lastSeenAt: instant })
export type Session = z.infer<typeof session>
const letterSwitches = z.strictObject(Object.fromEntries(switchableLetters.map(kind => [kind, z.boolean()])) as Record<typeof switchableLetters[number], z.ZodBoolean>)

/** One's own account. Passwords, addresses, tokens and erasure take a session, not a token, and a sign-in of the last ten minutes. */
export const accountEndpoints = {
  signInAgain: endpoint({ method: 'POST', path: '/api/auth/sign-in-again', access: 'session', only: 'session', summary: 'Prove who one is, for what asks for a fresh sign-in.', body: z.strictObject({ password }), answers: { 204: null } }),
  signOutEverywhere: endpoint({ method: 'POST', path: '/api/auth/sign-out-everywhere', access: 'session', only: 'session', summary: 'End every session of one’s own, this one too.', answers: { 204: null } }),
  changeMe: endpoint({ method: 'PATCH', path: '/api/me', access: 'session', account: true, only: 'session', summary: 'Change one’s name.', body: z.strictObject({ name }), answers: { 200: me } }),
  changePassword: endpoint({ method: 'POST', path: '/api/me/password', access: 'fresh-session', account: true, summary: 'A new password; other sessions end.', body: z.strictObject({ password: newPassword }), answers: { 204: null } }),
  requestEmailChange: endpoint({ method: 'POST', path: '/api/me/email', access: 'fresh-session', account: true, summary: 'A letter to the new address; it counts once its link was followed.', body: z.strictObject({ email }), answers: { 202: null } }),
  confirmEmail: endpoint({ method: 'POST', path: '/api/auth/email-confirmations', access: 'public', summary: 'Confirm the new address by the letter’s link.', body: z.strictObject({ token: letterToken }), answers: { 200: z.object({ user }) } }),
  listSessions: endpoint({ method: 'GET', path: '/api/me/sessions', access: 'session', only: 'session', summary: 'Where one is signed in.', answers: { 200: z.object({ items: z.array(session) }) } }),
  letterSwitches: endpoint({ method: 'GET', path: '/api/me/letters', access: 'session', summary: 'Which letters one gets.', answers: { 200: letterSwitches } }),
  changeLetterSwitches: endpoint({ method: 'PATCH', path: '/api/me/letters', access: 'session', only: 'session', summary: 'Switch kinds of letters on or off.', body: letterSwitches.partial(), answers: { 200: letterSwitches } }),
  listTokens: endpoint({ method: 'GET', path: '/api/me/tokens', access: 'session', only: 'session', summary: 'Tokens for scripts.', answers: { 200: z.object({ items: z.array(token) }) } }),
  createToken: endpoint({ method: 'POST', path: '/api/me/tokens', access: 'fresh-session', account: true, summary: 'A bearer token; it is shown this once.', body: tokenBody, answers: { 201: z.object({ id, token: z.string() }) } }),
  revokeToken: endpoint({ method: 'DELETE', path: '/api/me/tokens/:token', access: 'session', only: 'session', summary: 'Revoke a token.', answers: { 204: null } }),
  erasureOfMe: endpoint({ method: 'GET', path: '/api/me/erasure', access: 'session', only: 'session', summary: 'When the account will be erased, if that was asked for, and how long one can think it over.', answers: { 200: z.object({ eraseAfter: instant.nullable(), graceDays: z.number() }) } }),
  eraseMe: endpoint({ method: 'POST', path: '/api/me/erasure', access: 'fresh-session', summary: 'Erase the account and what is one’s own after a time of grace.', answers: { 200: z.object({ eraseAfter: instant }) } }),
  keepMe: endpoint({ method: 'DELETE', path: '/api/me/erasure', access: 'session', only: 'session', summary: 'Keep the account after all.', answers: { 204: null } }),
}
