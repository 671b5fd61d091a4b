import { randomUUID } from 'node:crypto'
import { sql } from '../../support/database'
import { newInvitation, resetLinkFor } from '../../support/letters'
import { newPersonIn, setRole } from '../../support/people'
import { newStudio } from '../../support/studio'
import type { RouteCase } from './route-case'
import type { World } from './world'

const newcomer = () => ({ name: 'Otto Lind', email: `${randomUUID()}@ropeworks.example`, password: 'a long enough one' })

/** A demo studio, which only the start command makes, with the world's people in it. */
async function newDemoStudio({ owner, technician }: World): Promise<string> {
  const { ids } = await newStudio()
  await sql('update studios set is_demo = true where id = $1', [ids.studio])
  await setRole(ids.studio, owner.ids.user, 'owner')
  await setRole(ids.studio, technician.ids.user, 'technician')
  return ids.studio
}

export const peopleCases: RouteCase[] = [
  {
    file: 'auth/register.post.ts', row: 'register', good: () => ({ json: newcomer(), status: 201 }),
    bad: [
      { why: 'a short password', call: () => ({ json: { ...newcomer(), password: 'short' }, status: 422, code: 'invalid_input' }) },
      { why: 'no e-mail address', call: () => ({ json: { ...newcomer(), email: 'rope' }, status: 422, code: 'invalid_input' }) },
      { why: 'an address that is taken', call: ({ owner }) => ({ json: { ...newcomer(), email: owner.email.toUpperCase() }, status: 409, code: 'email_taken' }) },
      { why: 'a name of 10 000 characters', call: () => ({ json: { ...newcomer(), name: 'n'.repeat(10_000) }, status: 422, code: 'invalid_input' }) },
    ],
  },
  {
    file: 'auth/login.post.ts', row: 'login', good: ({ owner }) => ({ json: { email: owner.email, password: owner.password } }),
    bad: [
      { why: 'a wrong password', call: ({ owner }) => ({ json: { email: owner.email, password: 'not the one' }, status: 401, code: 'wrong_credentials' }) },
      { why: 'an unknown address', call: () => ({ json: { email: newcomer().email, password: 'not the one' }, status: 401, code: 'wrong_credentials' }) },
    ],
  },
  { file: 'auth/logout.post.ts', row: 'logout', good: () => ({ status: 204 }) },
  { file: 'auth/reset-requests.post.ts', row: 'requestReset', good: ({ member }) => ({ json: { email: member.email }, status: 202 }) },
  {
    file: 'auth/resets.post.ts', row: 'resetPassword',
    good: async ({ anonymous }) => ({ json: { token: await resetLinkFor(anonymous, await newStudio()), password: 'an altogether new one' } }),
    bad: [
      { why: 'a link that nobody sent', call: () => ({ json: { token: 'x'.repeat(43), password: 'an altogether new one' }, status: 410, code: 'link_void' }) },
      { why: 'half a link', call: () => ({ json: { token: 'x'.repeat(20), password: 'an altogether new one' }, status: 422, code: 'invalid_input' }) },
    ],
  },
  { file: 'me/index.get.ts', row: 'me', good: () => ({}) },
  {
    file: 'studios/[studio]/people/[person].patch.ts', row: 'changePerson',
    good: async ({ owner }) => ({ params: { person: (await newPersonIn(owner.ids.studio, 'member')).ids.user }, json: { role: 'technician' } }),
    bad: [
      { why: 'leaving the studio without an owner', call: ({ owner }) => ({ params: { person: owner.ids.user }, json: { role: 'member' }, status: 409, code: 'last_owner' }) },
      { why: 'somebody who is not in the studio', call: ({ outsider }) => ({ params: { person: outsider.ids.user }, json: { role: 'member' }, status: 404, code: 'not_found' }) },
    ],
  },
  {
    file: 'studios/[studio]/people/[person].delete.ts', row: 'removePerson', caller: ({ owner }) => owner.agent,
    good: async ({ owner }) => ({ params: { person: (await newPersonIn(owner.ids.studio, 'member')).ids.user }, status: 204 }),
    bad: [{ why: 'taking the last owner out', call: ({ owner }) => ({ params: { person: owner.ids.user }, status: 409, code: 'last_owner' }) }],
  },
  { file: 'studios/[studio]/invitations/index.get.ts', row: 'listInvitations', good: () => ({}) },
  {
    file: 'studios/[studio]/invitations/index.post.ts', row: 'invite', good: () => ({ json: { email: newcomer().email, role: 'technician' }, status: 201 }),
    bad: [
      { why: 'no e-mail address', call: () => ({ json: { email: 'rope', role: 'member' }, status: 422, code: 'invalid_input' }) },
      { why: 'somebody who is in the studio', call: ({ member }) => ({ json: { email: member.email.toUpperCase(), role: 'member' }, status: 422, code: 'invalid_input' }) },
    ],
  },
  {
    file: 'studios/[studio]/invitations/[invitation].delete.ts', row: 'revokeInvitation',
    good: async ({ make }) => ({ params: { invitation: await make('invitations', { email: newcomer().email, role: 'member' }) }, status: 204 }),
  },
  {
    file: 'invitations/look.post.ts', row: 'lookAtInvitation', good: async () => ({ json: { token: (await newInvitation()).token } }),
    bad: [{ why: 'an invitation that nobody sent', call: () => ({ json: { token: 'x'.repeat(43) }, status: 410, code: 'link_void' }) }],
  },
  {
    file: 'invitations/accept.post.ts', row: 'acceptInvitation', good: async () => ({ json: { token: (await newInvitation()).token } }),
    bad: [{ why: 'an invitation that nobody sent', call: () => ({ json: { token: 'x'.repeat(43) }, status: 410, code: 'link_void' }) }],
  },
  {
    file: 'studios/[studio]/test-letters/[letter].get.ts', row: 'testLetter',
    good: async ({ make }) => ({ params: { letter: await make('test-letters', undefined) } }),
  },
  {
    file: 'studios/[studio]/erasure.post.ts', row: 'eraseStudio', good: async ({ owner }) => ({ json: { name: owner.studio.name } }),
    bad: [{ why: 'another name than the studio’s', call: () => ({ json: { name: 'Some other' }, status: 422, code: 'invalid_input' }) }],
  },
  {
    file: 'studios/[studio]/demo.delete.ts', row: 'removeDemo', good: async world => ({ params: { studio: await newDemoStudio(world) }, status: 204 }),
    bad: [{ why: 'a studio that is no demo', call: ({ owner }) => ({ params: { studio: owner.ids.studio }, status: 409, code: 'wrong_state' }) }],
  },
  { file: 'studios/[studio]/erasure.delete.ts', row: 'keepStudio', good: () => ({ status: 204 }) },
  {
    file: 'studios/index.post.ts', row: 'createStudio', good: () => ({ json: { name: 'Second floor' }, status: 201 }),
    bad: [{ why: 'an empty name', call: () => ({ json: { name: '  ' }, status: 422, code: 'invalid_input' }) }],
  },
  { file: 'studios/[studio]/index.get.ts', row: 'studio', good: () => ({}) },
  {
    file: 'studios/[studio]/index.patch.ts', row: 'changeStudio',
    good: async ({ owner }) => ({ json: { name: 'Rope Walk Printers’ Loft', revision: (await owner.agent.get(owner.root)).body.revision } }),
    bad: [{ why: 'an older revision', call: () => ({ json: { name: 'Rope Walk', revision: 99 }, status: 409, code: 'stale_revision' }) }],
  },
  { file: 'studios/[studio]/people/index.get.ts', row: 'people', good: () => ({}) },
  { file: 'studios/[studio]/test-letters/index.post.ts', row: 'sendTestLetter', good: () => ({ status: 202 }) },
  { file: 'studios/[studio]/events.get.ts', row: 'events', good: () => ({}), endless: true },
]
