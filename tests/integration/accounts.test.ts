import { randomUUID } from 'node:crypto'
import { getTableName } from 'drizzle-orm'
import { v7 as uuidv7 } from 'uuid'
import { describe, expect, it } from 'vitest'
import { studioTables } from '../../server/services/erasure'
import { sql } from '../support/database'
import { letterTo, newInvitation, resetLinkFor, secretIn } from '../support/letters'
import { newPersonIn } from '../support/people'
import { Agent, newStudio } from '../support/studio'

const address = () => `${randomUUID()}@ropeworks.example`
const bearer = (token: string) => ({ headers: { authorization: `Bearer ${token}` } })

describe('an invitation', () => {
  it('brings somebody new into the studio, in the role it names, and works once', async () => {
    const { host, email, token } = await newInvitation({ role: 'technician' })
    const look = await new Agent().post('/api/invitations/look', { token })
    expect(look.body).toEqual({ studioName: 'Weir House', role: 'technician', invitedBy: 'Ines Marlow', email, hasAccount: false })
    const guest = new Agent()
    const joined = await guest.post('/api/auth/register', { name: 'Otto Lind', email, password: 'a long enough one', invitationToken: token })
    expect(joined.body.studio).toMatchObject({ id: host.ids.studio, role: 'technician' })
    expect((await guest.get('/api/me')).body.studios).toHaveLength(1)
    expect((await host.agent.get(`${host.root}/invitations`)).body.items).toEqual([])
    expect((await new Agent().post('/api/invitations/look', { token })).body.data.code).toBe('link_void')
    expect((await (await newStudio()).agent.post('/api/invitations/accept', { token })).body.data.code).toBe('link_void')
  })

  it('takes somebody with an account in, and lowers no role', async () => {
    const host = await newStudio('Weir House')
    const owner = await newPersonIn(host.ids.studio, 'owner')
    const { token } = await newInvitation({ host, role: 'member' })
    expect((await owner.agent.post('/api/invitations/accept', { token })).body).toMatchObject({ id: host.ids.studio, role: 'owner' })
  })

  it('no longer works once it is taken back, sent again, or old', async () => {
    const { host, email, id, token } = await newInvitation()
    const second = await newInvitation({ host, email })
    expect((await new Agent().post('/api/invitations/look', { token })).status).toBe(410)
    await host.agent.delete(`${host.root}/invitations/${second.id}`)
    expect((await new Agent().post('/api/invitations/look', { token: second.token })).status).toBe(410)
    expect((await host.agent.delete(`${host.root}/invitations/${id}`)).status).toBe(404)
    const third = await newInvitation({ host, email })
    await sql('update invitations set expires_at = now() where id = $1', [third.id])
    expect((await new Agent().post('/api/invitations/look', { token: third.token })).status).toBe(410)
  })

  it('is one, however often the same is sent', async () => {
    const host = await newStudio()
    const [id, email] = [uuidv7(), address()]
    const sent = await Promise.all([1, 2, 3].map(() => host.agent.post(`${host.root}/invitations`, { id, email, role: 'member' })))
    expect(sent.map(answer => answer.status).sort()).toEqual([200, 200, 201])
    expect(await sql('select 1 from letters where to_address = $1', [email])).toHaveLength(1)
  })

  it('keeps its secret as a hash only, once its letter has gone', async () => {
    const { id, token } = await newInvitation()
    const [row] = await sql('select * from invitations where id = $1', [id])
    expect(JSON.stringify(row)).not.toContain(token)
  })
})

describe('a new password by letter', () => {
  it('ends every session of before, and signs in', async () => {
    const person = await newStudio()
    const token = await resetLinkFor(new Agent(), person)
    const fresh = new Agent()
    expect((await fresh.post('/api/auth/resets', { token, password: 'an altogether new one' })).body.user.id).toBe(person.ids.user)
    expect((await person.agent.get('/api/me')).status).toBe(401)
    expect((await fresh.get('/api/me')).status).toBe(200)
    expect((await new Agent().post('/api/auth/login', { email: person.email, password: person.password })).status).toBe(401)
    expect((await new Agent().post('/api/auth/login', { email: person.email, password: 'an altogether new one' })).status).toBe(200)
    expect((await new Agent().post('/api/auth/resets', { token, password: 'yet another new one' })).body.data.code).toBe('link_void')
    expect((await letterTo(person.email, 'account-notice')).subject).toBe('Your password has changed')
  })

  it('answers the same for an address without an account, and writes no letter', async () => {
    const email = address()
    const answer = await new Agent().post('/api/auth/reset-requests', { email })
    expect([answer.status, answer.text]).toEqual([202, ''])
    expect(await sql('select 1 from letters where to_address = $1', [email])).toEqual([])
  })
})

describe('a new address', () => {
  it('counts once its letter’s link was followed, and the old one is told', async () => {
    const { agent, email } = await newStudio()
    const next = address()
    await agent.post('/api/me/email', { email: next })
    expect((await agent.get('/api/me')).body.user.email).toBe(email)
    const token = secretIn(await letterTo(next, 'email-change'))
    expect((await new Agent().post('/api/auth/email-confirmations', { token })).body.user.email).toBe(next)
    expect((await agent.get('/api/me')).body.user.email).toBe(next)
    expect((await letterTo(email, 'account-notice')).text).toContain(next)
  })

  it('is refused when somebody else has taken it meanwhile', async () => {
    const { agent } = await newStudio()
    const next = address()
    await agent.post('/api/me/email', { email: next })
    const token = secretIn(await letterTo(next, 'email-change'))
    await new Agent().post('/api/auth/register', { name: 'Otto Lind', email: next, password: 'a long enough one' })
    expect((await new Agent().post('/api/auth/email-confirmations', { token })).body.data.code).toBe('email_taken')
  })
})

describe('a token', () => {
  it('works in its studio only, with its role at most, until it is revoked', async () => {
    const host = await newStudio('Rope Works')
    await host.agent.post('/api/studios', { name: 'Second floor' })
    const { id, token } = (await host.agent.post('/api/me/tokens', { name: 'Script', studioId: host.ids.studio, roleCeiling: 'member' })).body
    expect(token).toMatch(/^emu_[\w-]{43}$/)
    const script = new Agent()
    expect((await script.get('/api/me', bearer(token))).body.studios).toMatchObject([{ id: host.ids.studio, role: 'member' }])
    expect((await script.get(`${host.root}/papers`, bearer(token))).status).toBe(200)
    expect((await script.post(`${host.root}/papers`, { name: 'Cotton' }, bearer(token))).body.data.code).toBe('role_too_low')
    const second = (await host.agent.get('/api/me')).body.studios.find((studio: { id: string }) => studio.id !== host.ids.studio)
    expect((await script.get(`/api/studios/${second.id}/papers`, bearer(token))).status).toBe(404)
    expect(JSON.stringify(await sql('select * from tokens where id = $1', [id]))).not.toContain(token)
    await host.agent.delete(`/api/me/tokens/${id}`)
    expect((await script.get('/api/me', bearer(token))).status).toBe(401)
  })

  it('never does what is for a session only, and runs out', async () => {
    const { agent } = await newStudio()
    const { id, token } = (await agent.post('/api/me/tokens', { name: 'Script' })).body
    const script = new Agent()
    for (const [path, json] of [['/api/me/tokens', { name: 'Another' }], ['/api/me/password', { password: 'an altogether new one' }], ['/api/me/email', { email: address() }], ['/api/me/erasure', undefined]] as const) {
      expect((await script.post(path, json, bearer(token))).body.data.code, path).toBe('session_required')
    }
    await sql('update tokens set expires_at = now() where id = $1', [id])
    expect((await script.get('/api/me', bearer(token))).status).toBe(401)
  })
})

describe('a fresh sign-in', () => {
  it('is asked for after ten minutes, and given by the password', async () => {
    const { agent, ids, password } = await newStudio()
    await sql('update sessions set fresh_at = now() - interval \'11 minutes\' where user_id = $1', [ids.user])
    expect((await agent.post('/api/me/tokens', { name: 'Script' })).body.data.code).toBe('fresh_sign_in_required')
    expect((await agent.post('/api/auth/sign-in-again', { password: 'not the one' })).status).toBe(401)
    expect((await agent.post('/api/auth/sign-in-again', { password })).status).toBe(204)
    expect((await agent.post('/api/me/tokens', { name: 'Script' })).status).toBe(201)
  })

  it('leaves nothing open when one signs out everywhere', async () => {
    const { agent, email, password } = await newStudio()
    const phone = new Agent()
    await phone.post('/api/auth/login', { email, password })
    expect((await agent.get('/api/me/sessions')).body.items).toHaveLength(2)
    await phone.post('/api/auth/sign-out-everywhere')
    expect((await agent.get('/api/me')).status).toBe(401)
  })
})

describe('letters', () => {
  it('that may be switched off stay away', async () => {
    const host = await newStudio()
    const guest = await newPersonIn(host.ids.studio, 'member')
    await guest.agent.patch('/api/me/letters', { 'studio-notice': false })
    await host.agent.patch(`${host.root}/people/${guest.ids.user}`, { role: 'technician' })
    expect(await sql('select 1 from letters where user_id = $1', [guest.ids.user])).toEqual([])
    await guest.agent.patch('/api/me/letters', { 'studio-notice': true })
    await host.agent.patch(`${host.root}/people/${guest.ids.user}`, { role: 'member' })
    expect((await letterTo(guest.email, 'studio-notice')).text).toContain('a member')
  })

  it('carry names as they are, as text and as HTML', async () => {
    const host = await newStudio('<b>Rope & Works</b>')
    const { email } = await newInvitation({ host })
    const letter = await letterTo(email)
    expect(letter.text).toContain('<b>Rope & Works</b>')
    expect(letter.html).toContain('&lt;b&gt;Rope &amp; Works&lt;/b&gt;')
    expect(letter.html).not.toMatch(/<(?:img|script|link)/)
  })
})

describe('erasure', () => {
  it('knows every table of a studio', async () => {
    const rows = await sql('select table_name from information_schema.columns where column_name = \'studio_id\' and table_schema = \'public\'')
    const others = ['events'] // the audit trail stays; it holds ids only
    expect(studioTables.map(table => getTableName(table)).sort()).toEqual(rows.map(row => row.table_name as string).filter(name => !others.includes(name)).sort())
  })

  it('of an account waits until nobody is left without an owner', async () => {
    const host = await newStudio()
    await newPersonIn(host.ids.studio, 'member')
    expect((await host.agent.post('/api/me/erasure')).body.data.code).toBe('last_owner')
    const alone = await newStudio()
    const days = (Date.parse((await alone.agent.post('/api/me/erasure')).body.eraseAfter) - Date.now()) / 86_400_000
    expect(days).toBeGreaterThan(13)
    expect((await alone.agent.delete('/api/me/erasure')).status).toBe(204)
  })
})
