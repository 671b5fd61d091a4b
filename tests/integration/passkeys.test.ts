import { describe, expect, it } from 'vitest'
import { Authenticator, newPasskey, passkeyOrigin } from '../support/authenticator'
import { sql } from '../support/database'
import { letterTo } from '../support/letters'
import { Agent, newStudio } from '../support/studio'

const signInOptions = async (agent = new Agent()) => (await agent.post('/api/auth/passkeys/options')).body
const signIn = (credential: unknown, agent = new Agent()) => agent.post('/api/auth/passkeys/sign-in', { credential })
const refused = { status: 401, body: { data: { code: 'passkey_refused' } } }

describe('a passkey', () => {
  it('signs in without a name typed, is listed, told of by letter, and no longer works once it is removed', async () => {
    const { agent, ids, email } = await newStudio()
    const { authenticator, id } = await newPasskey(agent)
    expect((await letterTo(email, 'account-notice')).text).toContain('“Phone by the sink” was added')
    const phone = new Agent()
    expect((await signIn(authenticator.get(await signInOptions(phone)), phone)).body.user.id).toBe(ids.user)
    expect((await phone.get('/api/me')).body.user.id).toBe(ids.user)
    const { items } = (await agent.get('/api/me/passkeys')).body
    expect(items).toMatchObject([{ id, name: 'Phone by the sink', backedUp: false }])
    expect(items[0].lastUsedAt).not.toBeNull()
    expect((await agent.delete(`/api/me/passkeys/${id}`)).status).toBe(204)
    expect(await signIn(authenticator.get(await signInOptions()))).toMatchObject(refused)
    expect((await letterTo(email, 'account-notice')).subject).toBe('A passkey was removed from your account')
    expect((await sql('select kind from events where user_id = $1 and kind like \'passkey.%\' order by id', [ids.user])).map(({ kind }) => kind)).toEqual(['passkey.added', 'passkey.removed'])
  })

  it('signs in again, so that an account without a password can do what asks for a fresh sign-in', async () => {
    const { agent, ids } = await newStudio()
    const { authenticator } = await newPasskey(agent)
    await sql('update users set password_hash = null where id = $1', [ids.user])
    await sql('update sessions set fresh_at = now() - interval \'11 minutes\' where user_id = $1', [ids.user])
    expect((await agent.get('/api/me/ways')).body).toMatchObject({ password: false, passkeys: 1 })
    expect((await agent.post('/api/me/passkeys/options')).body.data.code).toBe('fresh_sign_in_required')
    const options = (await agent.post('/api/auth/sign-in-again/passkey-options')).body
    expect(options.allowCredentials.map((allowed: { id: string }) => allowed.id)).toEqual([authenticator.id])
    expect((await agent.post('/api/auth/sign-in-again/passkey', { credential: authenticator.get(options) })).status).toBe(204)
    expect((await agent.post('/api/me/passkeys/options')).status).toBe(200)
  })

  it('stays when it is the only way in', async () => {
    const { agent, ids } = await newStudio()
    const [first, second] = [await newPasskey(agent), await newPasskey(agent)]
    await sql('update users set password_hash = null where id = $1', [ids.user])
    const removed = await Promise.all([first, second].map(({ id }) => agent.delete(`/api/me/passkeys/${id}`)))
    expect(removed.map(answer => answer.status).sort()).toEqual([204, 409])
    expect(removed.find(answer => answer.status === 409)!.body).toMatchObject({ data: { code: 'last_way_in' }, message: expect.stringContaining('only way of signing in') })
    expect((await agent.get('/api/me/passkeys')).body.items).toHaveLength(1)
  })

  it('is one account’s only', async () => {
    const [{ agent }, other] = [await newStudio(), await newStudio()]
    const { authenticator } = await newPasskey(agent)
    const credential = authenticator.create((await other.agent.post('/api/me/passkeys/options')).body)
    expect(await other.agent.post('/api/me/passkeys', { name: 'Again', credential })).toMatchObject(refused)
    expect((await other.agent.get('/api/me/passkeys')).body.items).toEqual([])
  })
})

describe('a passkey is refused', () => {
  it('when its count goes back, or stands still', async () => {
    const { authenticator } = await newPasskey((await newStudio()).agent)
    expect((await signIn(authenticator.get(await signInOptions(), { counter: 7 }))).status).toBe(200)
    for (const counter of [7, 3, 0]) expect(await signIn(authenticator.get(await signInOptions(), { counter })), String(counter)).toMatchObject(refused)
    expect((await signIn(authenticator.get(await signInOptions(), { counter: 8 }))).status).toBe(200)
  })

  it('when it was made, or signs, at another address', async () => {
    const { agent } = await newStudio()
    const { authenticator } = await newPasskey(agent)
    for (const stranger of [new Authenticator('https://elsewhere.example', authenticator.rpId), new Authenticator(authenticator.origin, 'elsewhere.example')]) {
      const credential = stranger.create((await agent.post('/api/me/passkeys/options')).body)
      expect(await agent.post('/api/me/passkeys', { name: 'Elsewhere', credential })).toMatchObject(refused)
      const elsewhere = Object.create(authenticator, { origin: { value: stranger.origin }, rpId: { value: stranger.rpId } }) as Authenticator
      expect(await signIn(elsewhere.get(await signInOptions()))).toMatchObject(refused)
    }
    expect((await signIn(authenticator.get(await signInOptions()))).status).toBe(200)
  })

  it('when its answer comes twice, too late, or to a challenge that nobody gave', async () => {
    const { agent } = await newStudio()
    const { authenticator } = await newPasskey(agent)
    const options = await signInOptions()
    expect((await signIn(authenticator.get(options))).status).toBe(200)
    expect(await signIn(authenticator.get(options))).toMatchObject(refused)
    const late = await signInOptions()
    await sql('update passkey_challenges set expires_at = now() where challenge = $1', [late.challenge])
    expect(await signIn(authenticator.get(late))).toMatchObject(refused)
    expect(await signIn(authenticator.get({ challenge: 'A'.repeat(43) }))).toMatchObject(refused)
    await signInOptions()
    expect(await sql('select 1 from passkey_challenges where challenge = $1', [late.challenge])).toEqual([])
  })

  it('when it answers another person’s challenge, or one for something else', async () => {
    const [{ agent }, other] = [await newStudio(), await newStudio()]
    const { authenticator } = await newPasskey(agent)
    const theirs = new Authenticator(await passkeyOrigin(agent)).create((await other.agent.post('/api/me/passkeys/options')).body)
    expect(await agent.post('/api/me/passkeys', { name: 'Not mine', credential: theirs })).toMatchObject(refused)
    const toSignIn = new Authenticator(await passkeyOrigin(agent)).create(await signInOptions())
    expect(await agent.post('/api/me/passkeys', { name: 'Not for this', credential: toSignIn })).toMatchObject(refused)
    const again = (await other.agent.post('/api/auth/sign-in-again/passkey-options')).body
    expect(await agent.post('/api/auth/sign-in-again/passkey', { credential: authenticator.get(again) })).toMatchObject(refused)
    const othersOwn = (await other.agent.post('/api/auth/sign-in-again/passkey-options')).body
    expect(await other.agent.post('/api/auth/sign-in-again/passkey', { credential: authenticator.get(othersOwn) })).toMatchObject(refused)
  })

  it('when nobody has shown finger, face or PIN, or when it names another person', async () => {
    const { authenticator } = await newPasskey((await newStudio()).agent)
    expect(await signIn(authenticator.get(await signInOptions(), { verified: false }))).toMatchObject(refused)
    authenticator.userHandle = Buffer.alloc(16).toString('base64url')
    expect(await signIn(authenticator.get(await signInOptions()))).toMatchObject(refused)
  })
})
