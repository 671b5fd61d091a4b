import { randomUUID } from 'node:crypto'
import { letterTo, secretIn } from '../../support/letters'
import { newStudio } from '../../support/studio'
import type { RouteCase } from './route-case'

const address = () => `${randomUUID()}@ropeworks.example`

async function confirmationLink(): Promise<string> {
  const { agent } = await newStudio()
  const email = address()
  await agent.post('/api/me/email', { email })
  return secretIn(await letterTo(email, 'email-change'))
}

export const accountCases: RouteCase[] = [
  {
    file: 'auth/sign-in-again.post.ts', row: 'signInAgain', good: ({ owner }) => ({ json: { password: owner.password }, status: 204 }),
    bad: [{ why: 'a wrong password', call: () => ({ json: { password: 'not the one' }, status: 401, code: 'wrong_credentials' }) }],
  },
  { file: 'auth/sign-out-everywhere.post.ts', row: 'signOutEverywhere', caller: async () => (await newStudio()).agent, good: () => ({ status: 204 }) },
  {
    file: 'auth/email-confirmations.post.ts', row: 'confirmEmail', good: async () => ({ json: { token: await confirmationLink() } }),
    bad: [{ why: 'a link that nobody sent', call: () => ({ json: { token: 'x'.repeat(43) }, status: 410, code: 'link_void' }) }],
  },
  { file: 'me/index.patch.ts', row: 'changeMe', good: () => ({ json: { name: 'Ines Marlow' } }), bad: [{ why: 'an empty name', call: () => ({ json: { name: ' ' }, status: 422, code: 'invalid_input' }) }] },
  {
    file: 'me/password.post.ts', row: 'changePassword', caller: async () => (await newStudio()).agent, good: () => ({ json: { password: 'an altogether new one' }, status: 204 }),
    bad: [{ why: 'a short password', call: () => ({ json: { password: 'short' }, status: 422, code: 'invalid_input' }) }],
  },
  {
    file: 'me/email.post.ts', row: 'requestEmailChange', good: () => ({ json: { email: address() }, status: 202 }),
    bad: [{ why: 'an address that is taken', call: ({ member }) => ({ json: { email: member.email }, status: 409, code: 'email_taken' }) }],
  },
  { file: 'me/sessions.get.ts', row: 'listSessions', good: () => ({}) },
  { file: 'me/letters.get.ts', row: 'letterSwitches', good: () => ({}) },
  { file: 'me/letters.patch.ts', row: 'changeLetterSwitches', good: () => ({ json: { 'studio-notice': true } }), bad: [{ why: 'a letter that can’t be switched off', call: () => ({ json: { 'password-reset': false }, status: 422, code: 'invalid_input' }) }] },
  { file: 'me/tokens/index.get.ts', row: 'listTokens', good: () => ({}) },
  {
    file: 'me/tokens/index.post.ts', row: 'createToken', good: () => ({ json: { name: 'A script', roleCeiling: 'member' }, status: 201 }),
    bad: [
      { why: 'a time that has passed', call: () => ({ json: { name: 'A script', expiresAt: '2020-01-01T00:00:00Z' }, status: 422, code: 'invalid_input' }) },
      { why: 'a studio of others', call: ({ outsider }) => ({ json: { name: 'A script', studioId: outsider.ids.studio }, status: 422, code: 'invalid_input' }) },
    ],
  },
  {
    file: 'me/tokens/[token].delete.ts', row: 'revokeToken',
    good: async ({ owner }) => ({ params: { token: (await owner.agent.post('/api/me/tokens', { name: 'A script' })).body.id }, status: 204 }),
  },
  { file: 'me/erasure.get.ts', row: 'erasureOfMe', good: () => ({}) },
  { file: 'me/erasure.post.ts', row: 'eraseMe', caller: async () => (await newStudio()).agent, good: () => ({}) },
  { file: 'me/erasure.delete.ts', row: 'keepMe', good: () => ({ status: 204 }) },
]
