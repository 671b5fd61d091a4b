import { z } from 'zod'
import { endpoint } from './endpoint'
import { limits } from './limits'
import { id, instant, name } from './primitives'

export const roles = ['member', 'technician', 'owner'] as const
export const role = z.enum(roles)
export type Role = z.infer<typeof role>

export const email = z.email('That is not an e-mail address.').max(limits.emailLength)
export const newPassword = z.string().min(limits.passwordMinLength, `Use at least ${limits.passwordMinLength} characters.`).max(limits.passwordMaxLength)

export const user = z.object({ id, name: z.string(), email: z.string() })
export const studioMembership = z.object({ id, slug: z.string(), name: z.string(), role })
export const studio = z.object({ id, slug: z.string(), name: z.string() })
export type User = z.infer<typeof user>
export type StudioMembership = z.infer<typeof studioMembership>

export const registerBody = z.strictObject({ name, email, password: newPassword, studioName: name.optional() })
export const loginBody = z.strictObject({ email: z.string().max(limits.emailLength), password: z.string().max(limits.passwordMaxLength) })
const signedIn = z.object({ user, studio: studioMembership })
const me = z.object({ user, studios: z.array(studioMembership) })

export const peopleEndpoints = {
  register: endpoint({ method: 'POST', path: '/api/auth/register', access: 'public', summary: 'Sign up; makes a studio of one’s own and a session.', body: registerBody, answers: { 201: signedIn } }),
  login: endpoint({ method: 'POST', path: '/api/auth/login', access: 'public', summary: 'Sign in.', body: loginBody, answers: { 200: me } }),
  logout: endpoint({ method: 'POST', path: '/api/auth/logout', access: 'public', summary: 'Sign out of this session.', answers: { 204: null } }),
  me: endpoint({ method: 'GET', path: '/api/me', access: 'session', summary: 'The signed-in person and their studios.', answers: { 200: me } }),
  createStudio: endpoint({ method: 'POST', path: '/api/studios', access: 'session', summary: 'Open another studio, as its owner.', body: z.strictObject({ name }), answers: { 201: studioMembership } }),
  studio: endpoint({ method: 'GET', path: '/api/studios/:studio', access: 'member', summary: 'One studio.', answers: { 200: studioMembership.extend({ createdAt: instant, usage: z.object({ bytes: z.number(), maxBytes: z.number() }) }) } }),
  people: endpoint({ method: 'GET', path: '/api/studios/:studio/people', access: 'member', summary: 'The studio’s people and roles.', answers: { 200: z.object({ items: z.array(z.object({ id, name: z.string(), role })) }) } }),
  events: endpoint({ method: 'GET', path: '/api/studios/:studio/events', access: 'member', summary: 'Hints of what has changed, as server-sent events `{ topic, id, revision }`; `resync` first.', answers: { 200: ['text/event-stream'] } }),
}
