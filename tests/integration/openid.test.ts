import { join } from 'node:path'
import { afterAll, beforeAll, describe, expect, inject, it } from 'vitest'
import { builtPrograms, inData } from '../../server/cli/paths.mjs'
import { startWeb } from '../support/application'
import { sql } from '../support/database'
import { letterTo, newInvitation } from '../support/letters'
import { atProvider, signInAt } from '../support/openid'
import { newAccount, openIdSettings } from '../support/openid-accounts'
import { Agent, application, newStudio } from '../support/studio'

const start = '/api/auth/openid/start'
const problem = (why: string) => ({ status: 302, location: `/sign-in-problem?why=${why}` })
const staleSessions = (userId: string) => sql('update sessions set fresh_at = now() - interval \'11 minutes\' where user_id = $1', [userId])

describe('somebody at the provider', () => {
  it('who is new gets an account without a password and a studio, and is known the next time', async () => {
    const account = newAccount()
    const agent = new Agent()
    const { status, location } = await signInAt(agent, account)
    const me = (await agent.get('/api/me')).body
    expect([status, location]).toEqual([302, `/s/${me.studios[0].slug}`])
    expect(me.user).toMatchObject({ name: 'Otto Lind', email: account.email })
    expect((await agent.get('/api/me/ways')).body).toEqual({ password: false, passkeys: 0, openId: true })
    const elsewhere = new Agent()
    // Known by who they are at the provider, whatever address they have there now.
    expect(await signInAt(elsewhere, { ...account, email: 'moved@ropeworks.example', email_verified: false }, { body: { next: '/account' } })).toEqual({ status: 302, location: '/account' })
    expect((await elsewhere.get('/api/me')).body.user.id).toBe(me.user.id)
  })

  it('whose verified address has an account gets into that one, and a letter tells of it', async () => {
    const { email, ids } = await newStudio()
    const agent = new Agent()
    await signInAt(agent, newAccount({ email: email.toUpperCase() }))
    expect((await agent.get('/api/me')).body.user.id).toBe(ids.user)
    expect((await letterTo(email, 'account-notice')).subject).toBe('Your account opens with Weir House')
    expect(await sql('select 1 from events where user_id = $1 and kind = \'identity.linked\'', [ids.user])).toHaveLength(1)
  })

  it('whose address is not verified gets into no account, and makes none', async () => {
    const { email, ids } = await newStudio()
    for (const account of [newAccount({ email, email_verified: false }), newAccount({ email, email_verified: undefined }), newAccount({ email: undefined })]) {
      const agent = new Agent()
      expect(await signInAt(agent, account)).toEqual(problem('openid_unverified'))
      expect((await agent.get('/api/me')).status).toBe(401)
    }
    expect(await sql('select 1 from identities where user_id = $1', [ids.user])).toEqual([])
  })

  it('joins the studio that an invitation names', async () => {
    const { host, token } = await newInvitation({ role: 'technician' })
    const agent = new Agent()
    expect(await signInAt(agent, newAccount(), { body: { invitationToken: token } })).toEqual({ status: 302, location: `/s/${host.studio.slug}` })
    expect((await agent.get('/api/me')).body.studios).toMatchObject([{ id: host.ids.studio, role: 'technician' }])
    expect(await signInAt(new Agent(), newAccount(), { body: { invitationToken: token } })).toEqual(problem('link_void'))
  })
})

describe('what comes back is refused', () => {
  it('when state or nonce are another sign-in’s, or it was broken off', async () => {
    const agent = new Agent()
    expect(await signInAt(agent, newAccount(), { changes: { state: 'another' } })).toEqual(problem('openid_refused'))
    expect(await signInAt(agent, newAccount(), { changes: { nonce: 'another' } })).toEqual(problem('openid_refused'))
    expect(await signInAt(agent, newAccount({ sub: 'nobody' }))).toEqual(problem('openid_refused'))
    expect((await agent.get('/api/me')).status).toBe(401)
  })

  it('when it comes twice, too late, or in another browser', async () => {
    const [agent, other] = [new Agent(), new Agent()]
    const back = async () => await atProvider((await agent.post(start, {})).body.url, newAccount())
    const address = await back()
    const cookie = agent.cookieHeader()
    expect((await other.get(address)).headers.get('location')).toBe('/sign-in-problem?why=openid_void')
    expect((await agent.get(address)).headers.get('location')).toMatch(/^\/s\//)
    expect((await other.get(address, { headers: { cookie } })).headers.get('location')).toBe('/sign-in-problem?why=openid_void')
    const late = await back()
    await sql('update openid_sign_ins set expires_at = now()')
    expect((await agent.get(late)).headers.get('location')).toBe('/sign-in-problem?why=openid_void')
  })

  it('when the page to go on to is not ours', async () => {
    for (const next of ['//elsewhere.example', 'https://elsewhere.example', '/s/\\elsewhere.example', '/s//elsewhere']) expect((await new Agent().post(start, { next })).status, next).toBe(422)
  })
})

describe('a fresh sign-in at the provider', () => {
  it('lets an account without a password do what asks for one, and nobody else', async () => {
    const account = newAccount()
    const agent = new Agent()
    await signInAt(agent, account)
    const { id } = (await agent.get('/api/me')).body.user
    await staleSessions(id)
    const again = { path: '/api/auth/sign-in-again/openid', body: { next: '/account' } }
    expect(await signInAt(agent, newAccount(), again)).toEqual(problem('openid_refused'))
    expect((await agent.post('/api/me/tokens', { name: 'Script' })).body.data.code).toBe('fresh_sign_in_required')
    expect(await signInAt(agent, account, again)).toEqual({ status: 302, location: '/account' })
    expect((await agent.post('/api/me/tokens', { name: 'Script' })).status).toBe(201)
  })
})

describe('an installation', () => {
  const started: Awaited<ReturnType<typeof startWeb>>[] = []
  beforeAll(async () => {
    const settings = (name: string, env: Record<string, string>) => ({ programs: builtPrograms, databaseUrl: application().databaseUrl, storage: join(inData('test-files'), `${process.pid}-${name}`), env })
    started.push(...await Promise.all([
      startWeb(settings('invite', { ...openIdSettings(inject('openIdIssuer')), REGISTRATION: 'invite' })),
      startWeb(settings('down', openIdSettings('http://127.0.0.1:9'))), // nobody listens there
    ]))
  })
  afterAll(() => Promise.all(started.map(web => web.stop())))

  it('by invitation only takes nobody new in without one', async () => {
    const { address } = started[0]!
    expect(await signInAt(new Agent(address), newAccount())).toEqual(problem('registration_closed'))
    const { token } = await newInvitation()
    expect((await signInAt(new Agent(address), newAccount(), { body: { invitationToken: token } })).location).toMatch(/^\/s\//)
  })

  it('whose provider is down says so, and other ways keep working', async () => {
    const { email, password } = await newStudio()
    const agent = new Agent(started[1]!.address)
    const answer = await agent.post(start, {})
    expect([answer.status, answer.body.data.code]).toEqual([503, 'openid_unreachable'])
    expect(answer.body.message).toContain('Weir House does not answer')
    expect((await agent.get('/api/auth/ways')).body.openId).toEqual({ name: 'Weir House' })
    expect((await agent.post('/api/auth/login', { email, password })).status).toBe(200)
  })
})
