import { z } from 'zod'
import { endpoint } from './endpoint'
import { limits } from './limits'
import { id, instant, listOf, listQuery, name, newId, revision } from './primitives'

export const roles = ['member', 'technician', 'owner'] as const
export const role = z.enum(roles)
export type Role = z.infer<typeof role>

export const email = z.email('That is not an e-mail address.').max(limits.emailLength)
export const newPassword = z.string().min(limits.passwordMinLength, `Use at least ${limits.passwordMinLength} characters.`).max(limits.passwordMaxLength)

/** `email` is null for students of a class, who joined with a first name alone. */
export const user = z.object({ id, name: z.string(), email: z.string().nullable() })
/** The class that one is a student of. Over: everything can be looked at and taken along, nothing changed. */
export const ownClass = z.object({ id, name: z.string(), endsAt: instant, takeAlongUntil: instant, isOver: z.boolean() })
export type OwnClass = z.infer<typeof ownClass>
/** `isDemo` is told to the owners of the invented demo studio alone. */
export const studioMembership = z.object({ id, slug: z.string(), name: z.string(), role, class: ownClass.optional(), isDemo: z.literal(true).optional() })
export const studio = z.object({ id, slug: z.string(), name: z.string() })
export type User = z.infer<typeof user>
export type StudioMembership = z.infer<typeof studioMembership>

/** What a letter's link carries: 32 random bytes, base64url. */
export const letterToken = z.string().regex(/^[\w-]{43}$/, 'This link is incomplete. Copy it from the letter as a whole.')
export const registerBody = z.strictObject({ name, email, password: newPassword, studioName: name.optional(), invitationToken: letterToken.optional() })
export const password = z.string().max(limits.passwordMaxLength)
export const loginBody = z.strictObject({ email: z.string().max(limits.emailLength), password })
const signedIn = z.object({ user, studio: studioMembership })
export const me = z.object({ user, studios: z.array(studioMembership) })

export const studioDetails = studioMembership.extend({
  createdAt: instant, revision,
  usage: z.object({ bytes: z.number(), maxBytes: z.number() }),
  /** when it will be erased, if somebody asked for that; how long one can think it over */
  eraseAfter: instant.nullable(), erasureGraceDays: z.number(),
})
export type StudioDetails = z.infer<typeof studioDetails>

export const invitationBody = z.strictObject({ id: newId, email, role })
export const invitation = z.object({ id, email: z.string(), role, invitedBy: z.string(), expiresAt: instant, createdAt: instant })
export type Invitation = z.infer<typeof invitation>

const person = '/api/studios/:studio/people/:person' as const
const invitations = '/api/studios/:studio/invitations' as const
export const peopleEndpoints = {
  register: endpoint({ method: 'POST', path: '/api/auth/register', access: 'public', summary: 'Sign up, with a session: into a studio of one’s own, or into the one that the invitation names.', body: registerBody, answers: { 201: signedIn } }),
  login: endpoint({ method: 'POST', path: '/api/auth/login', access: 'public', summary: 'Sign in.', body: loginBody, answers: { 200: me } }),
  logout: endpoint({ method: 'POST', path: '/api/auth/logout', access: 'public', summary: 'Sign out of this session.', answers: { 204: null } }),
  requestReset: endpoint({ method: 'POST', path: '/api/auth/reset-requests', access: 'public', summary: 'A letter with a link to set a new password, if the address has an account; the answer does not tell.', body: z.strictObject({ email: z.string().max(limits.emailLength) }), answers: { 202: null } }),
  resetPassword: endpoint({ method: 'POST', path: '/api/auth/resets', access: 'public', summary: 'Set a new password by the letter’s link; every session of before ends.', body: z.strictObject({ token: letterToken, password: newPassword }), answers: { 200: me } }),
  me: endpoint({ method: 'GET', path: '/api/me', access: 'session', summary: 'The signed-in person and their studios.', answers: { 200: me } }),
  createStudio: endpoint({ method: 'POST', path: '/api/studios', access: 'session', account: true, summary: 'Open another studio, as its owner.', body: z.strictObject({ name }), answers: { 201: studioMembership } }),
  studio: endpoint({ method: 'GET', path: '/api/studios/:studio', access: 'member', summary: 'One studio.', answers: { 200: studioDetails } }),
  changeStudio: endpoint({ method: 'PATCH', path: '/api/studios/:studio', access: 'owner', summary: 'Rename the studio; its address stays.', body: z.strictObject({ name, revision }), answers: { 200: studioDetails } }),
  people: endpoint({ method: 'GET', path: '/api/studios/:studio/people', access: 'member', summary: 'The studio’s people and roles.', answers: { 200: z.object({ items: z.array(z.object({ id, name: z.string(), role })) }) } }),
  changePerson: endpoint({ method: 'PATCH', path: person, access: 'owner', summary: 'Change somebody’s role; the last owner stays one.', body: z.strictObject({ role }), answers: { 200: z.object({ id, name: z.string(), role }) } }),
  removePerson: endpoint({ method: 'DELETE', path: person, access: 'member', summary: 'Take somebody out of the studio (owners), or leave it oneself.', answers: { 204: null } }),
  listInvitations: endpoint({ method: 'GET', path: invitations, access: 'owner', summary: 'Invitations that are open.', query: listQuery, answers: { 200: listOf(invitation) } }),
  invite: endpoint({ method: 'POST', path: invitations, access: 'owner', summary: 'Invite somebody by letter.', body: invitationBody, answers: { 200: invitation, 201: invitation } }),
  revokeInvitation: endpoint({ method: 'DELETE', path: `${invitations}/:invitation`, access: 'owner', summary: 'Take an invitation back.', answers: { 204: null } }),
  lookAtInvitation: endpoint({ method: 'POST', path: '/api/invitations/look', access: 'public', summary: 'What an invitation offers, for the page that its link opens.', body: z.strictObject({ token: letterToken }), answers: { 200: z.object({ studioName: z.string(), role, invitedBy: z.string(), email: z.string(), hasAccount: z.boolean() }) } }),
  acceptInvitation: endpoint({ method: 'POST', path: '/api/invitations/accept', access: 'session', account: true, summary: 'Join the studio.', body: z.strictObject({ token: letterToken }), answers: { 200: studioMembership } }),
  sendTestLetter: endpoint({ method: 'POST', path: '/api/studios/:studio/test-letters', access: 'owner', summary: 'A letter to oneself, to see whether mail works.', answers: { 202: z.object({ id }) } }),
  testLetter: endpoint({ method: 'GET', path: '/api/studios/:studio/test-letters/:letter', access: 'owner', summary: 'How far a test letter has come.', answers: { 200: z.object({ id, state: z.enum(['waiting', 'sending', 'sent', 'failed']), attempts: z.number().int(), lastError: z.string().nullable() }) } }),
  eraseStudio: endpoint({ method: 'POST', path: '/api/studios/:studio/erasure', access: 'owner', fresh: true, summary: 'Erase the studio after a time of grace.', body: z.strictObject({ name: z.string() }), answers: { 200: z.object({ eraseAfter: instant }) } }),
  removeDemo: endpoint({ method: 'DELETE', path: '/api/studios/:studio/demo', access: 'owner', only: 'session', summary: 'Remove the invented demo studio, its invented people and its files, at once; `wrong_state` for any other studio.', answers: { 204: null } }),
  keepStudio: endpoint({ method: 'DELETE', path: '/api/studios/:studio/erasure', access: 'owner', summary: 'Keep the studio after all.', answers: { 204: null } }),
  events: endpoint({ method: 'GET', path: '/api/studios/:studio/events', access: 'member', summary: 'Hints of what has changed, as server-sent events `{ topic, id, revision }`; `resync` first.', answers: { 200: ['text/event-stream'] } }),
}
