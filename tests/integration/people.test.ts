import { describe, expect, it } from 'vitest'
import { sql } from '../support/database'
import { newPersonIn, setRole } from '../support/people'
import { Agent, newStudio } from '../support/studio'

describe('signing up', () => {
  it('makes a studio of one’s own and a session', async () => {
    const { agent, studio, ids } = await newStudio('Weir House')
    const me = await agent.get('/api/me')
    expect(me.body).toMatchObject({ user: { id: ids.user, name: 'Ines Marlow' }, studios: [{ id: ids.studio, slug: studio.slug, name: 'Weir House', role: 'owner' }] })
  })

  it('gives studios of one name an address each, also at once', async () => {
    const name = `Quay ${crypto.randomUUID()}`
    const studios = await Promise.all(Array.from({ length: 5 }, () => newStudio(name)))
    expect(new Set(studios.map(({ studio }) => studio.slug)).size).toBe(5)
    const { agent, studio } = studios[0]!
    expect((await agent.get(`/api/studios/${studio.slug}`)).body).toMatchObject({ id: studio.id, usage: { bytes: 0 } })
  })

  it('takes an address once, however many ask at the same time', async () => {
    const person = () => ({ name: 'Otto Lind', email, password: 'a long enough one' })
    const email = `${crypto.randomUUID()}@ropeworks.example`
    const answers = await Promise.all(Array.from({ length: 4 }, () => new Agent().post('/api/auth/register', person())))
    expect(answers.map(a => a.status).sort()).toEqual([201, 409, 409, 409])
    expect(await sql('select 1 from users where lower(email) = $1', [email])).toHaveLength(1)
  })
})

describe('a session', () => {
  it('is a sealed cookie that scripts of pages can’t read and other sites’ requests don’t carry', async () => {
    const response = await new Agent().fetch('POST', '/api/auth/register', { json: { name: 'Otto Lind', email: `${crypto.randomUUID()}@ropeworks.example`, password: 'a long enough one' } })
    const cookies = response.headers.getSetCookie()
    expect(cookies).toHaveLength(1)
    expect(cookies[0]).toMatch(/^emulside=Fe26\.2\*\*.*; HttpOnly.*SameSite=Lax/i)
  })

  it('ends for good when its person signs out: a kept cookie opens nothing', async () => {
    const { agent } = await newStudio()
    const kept = agent.cookieHeader()
    expect((await agent.post('/api/auth/logout')).status).toBe(204)
    expect((await new Agent().get('/api/me', { headers: { cookie: kept } })).status).toBe(401)
  })

  it('ends by itself, and notes when it was last seen', async () => {
    const { agent, ids } = await newStudio()
    await sql('update sessions set last_seen_at = now() - interval \'1 hour\' where user_id = $1', [ids.user])
    await agent.get('/api/me')
    const [seen] = await sql('select extract(epoch from now() - last_seen_at)::float8 as ago from sessions where user_id = $1', [ids.user])
    expect(Number(seen!.ago)).toBeLessThan(60)
    await sql('update sessions set expires_at = now() where user_id = $1', [ids.user])
    expect((await agent.get('/api/me')).status).toBe(401)
  })

  it('counts for nothing beside a Bearer header, and a forged cookie for nothing at all', async () => {
    const { agent } = await newStudio()
    expect((await agent.get('/api/me', { headers: { authorization: 'Bearer emu_nothing' } })).body.data.code).toBe('not_signed_in')
    expect((await new Agent().get('/api/me', { headers: { cookie: 'emulside=Fe26.2**forged' } })).status).toBe(401)
  })

  it('is one of several: signing in elsewhere leaves the first', async () => {
    const { agent, email, password } = await newStudio()
    const phone = new Agent()
    expect((await phone.post('/api/auth/login', { email: ` ${email.toUpperCase()} `, password })).status).toBe(200)
    await phone.post('/api/auth/logout')
    expect((await agent.get('/api/me')).status).toBe(200)
  })
})

describe('requests from pages', () => {
  it('of our own are let through, whatever Host says', async () => {
    const { agent, root } = await newStudio()
    const answer = await agent.post(`${root}/papers`, { name: 'Cotton' }, { headers: { 'origin': agent.address, 'sec-fetch-site': 'same-origin' } })
    expect(answer.status).toBe(201)
  })
  it.each([['null'], ['http://127.0.0.1:1'], ['https://emulside.example']])('of %s are refused', async (origin) => {
    const { agent, root } = await newStudio()
    expect((await agent.post(`${root}/papers`, { name: 'Cotton' }, { headers: { origin } })).body.data.code).toBe('foreign_origin')
  })
  it('of a neighbouring site are refused, and reading is not', async () => {
    const { agent, root } = await newStudio()
    expect((await agent.post(`${root}/papers`, { name: 'Cotton' }, { headers: { 'sec-fetch-site': 'same-site' } })).status).toBe(403)
    expect((await agent.get(`${root}/papers`, { headers: { 'sec-fetch-site': 'cross-site' } })).status).toBe(200)
  })
})

describe('several studios', () => {
  it('belong to one person, with a role in each', async () => {
    const host = await newStudio('Rope Works')
    const guest = await newPersonIn(host.ids.studio, 'technician')
    await guest.agent.post('/api/studios', { name: 'Second floor' })
    const { studios } = (await guest.agent.get('/api/me')).body
    expect(studios.map((s: { role: string }) => s.role).sort()).toEqual(['owner', 'owner', 'technician'])
    const people = (await guest.agent.get(`${host.root}/people`)).body.items
    expect(people.map((p: { id: string, role: string }) => [p.id, p.role])).toEqual(expect.arrayContaining([[host.ids.user, 'owner'], [guest.ids.user, 'technician']]))
  })

  it('are left at once when the membership ends', async () => {
    const host = await newStudio()
    const guest = await newPersonIn(host.ids.studio, 'technician')
    expect((await guest.agent.post(`${host.root}/papers`, { name: 'Cotton' })).status).toBe(201)
    await setRole(host.ids.studio, guest.ids.user, 'member')
    expect((await guest.agent.post(`${host.root}/papers`, { name: 'Cotton' })).status).toBe(403)
    await setRole(host.ids.studio, guest.ids.user, null)
    expect((await guest.agent.get(`${host.root}/papers`)).status).toBe(404)
  })
})

describe('the audit trail', () => {
  it('says who did what', async () => {
    const { agent, ids, root } = await newStudio()
    const { id } = (await agent.post(`${root}/papers`, { name: 'Cotton' })).body
    await agent.post(`${root}/papers/${id}/archive`, { revision: 1 })
    const rows = await sql('select kind, record_id, user_id from events where studio_id = $1 order by id', [ids.studio])
    expect(rows.map(row => row.kind)).toEqual(['studio.opened', 'papers.created', 'papers.archived'])
    expect(rows[2]).toMatchObject({ record_id: id, user_id: ids.user })
  })

  it.each(['update events set kind = \'x\'', 'delete from events', 'delete from events where false', 'truncate events'])('refuses: %s', async (statement) => {
    await newStudio()
    await expect(sql(statement)).rejects.toThrow('append-only')
  })
})

describe('what is no route', () => {
  it('answers in the contract’s shape', async () => {
    const agent = new Agent()
    expect((await agent.get('/api/nothing')).body).toMatchObject({ statusCode: 404, data: { code: 'not_found' } })
    const wrong = await agent.call('PUT', '/api/openapi.json')
    expect(wrong.body).toMatchObject({ statusCode: 405, data: { code: 'method_not_allowed' } })
    expect(wrong.headers.get('allow')).toBe('GET, HEAD')
  })
  it('takes HEAD for GET without a body', async () => {
    const { agent, root } = await newStudio()
    const answer = await agent.call('HEAD', `${root}/papers`)
    expect([answer.status, answer.text]).toEqual([200, ''])
    expect((await new Agent().call('HEAD', `${root}/papers`)).status).toBe(401)
  })
})
