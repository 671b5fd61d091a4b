import { once } from 'node:events'
import { connect as connectTo } from 'node:net'
import { join } from 'node:path'
import { describe, expect, it, onTestFinished } from 'vitest'
import { builtPrograms } from '../../server/cli/paths.mjs'
import { startWeb } from '../support/application'
import { connect, newDatabase, newFolder } from '../support/house'
import { newClass } from '../support/classes'
import { Agent, newStudio } from '../support/studio'

/** Web with settings of this test's own. */
async function ownWeb(env: Record<string, string>) {
  const databaseUrl = await newDatabase('migrated')
  const web = await startWeb({ programs: builtPrograms, databaseUrl, storage: join(newFolder(), 'files'), env })
  onTestFinished(() => web.kill())
  return { web, database: await connect(databaseUrl) }
}

describe('sign-in', () => {
  it('takes ten attempts at an account from one address in a quarter of an hour, the right password or not', async () => {
    const { web } = await ownWeb({ RATE_LIMITS: 'true', TRUSTED_PROXIES: '127.0.0.1' })
    const { email, password } = await newStudio('Rope Works Studio', web.address)
    const attempt = (word: string, from: string, whose = email) => new Agent(web.address).post('/api/auth/login', { email: whose, password: word }, { headers: { 'x-forwarded-for': from } })
    // A window may end in between: then the count begins again, and up to 21 are let through.
    const statuses = []
    for (let i = 0; i < 21; i++) statuses.push((await attempt('wrong', '192.0.2.1')).status)
    expect(statuses.slice(0, 10)).toEqual(Array(10).fill(401))
    expect(statuses).toContain(429)

    const refused = await attempt(password, '192.0.2.1', email.toUpperCase())
    expect(refused.body).toMatchObject({ statusCode: 429, data: { code: 'too_many_requests' } })
    expect(Number(refused.headers.get('retry-after'))).toBeGreaterThan(0)
    expect((await attempt(password, '192.0.2.2')).status).toBe(200)
  })

  it('is not fooled by a forwarding header from somebody who is no trusted proxy', async () => {
    const { web, database } = await ownWeb({ RATE_LIMITS: 'true' })
    for (const from of ['192.0.2.1', '192.0.2.2']) await new Agent(web.address).post('/api/auth/login', { email: 'a@ropeworks.example', password: 'x' }, { headers: { 'x-forwarded-for': from } })
    const { rows } = await database.query('select key, sum(count)::int as count from rate_limits where key like \'login:address:%\' group by key')
    expect(rows).toMatchObject([{ count: 2 }])
    expect(JSON.stringify(rows)).not.toContain('127.0.0.1')
  })
})

describe('room codes', () => {
  it('are tried 120 times a quarter of an hour from one address, whether right or wrong', async () => {
    const { web } = await ownWeb({ RATE_LIMITS: 'true', TRUSTED_PROXIES: '127.0.0.1' })
    const { roomCode } = await newClass(await newStudio('Rope Works Studio', web.address))
    const look = (code: string, from: string) => new Agent(web.address).post('/api/join/look', { roomCode: code }, { headers: { 'x-forwarded-for': from } })
    // A window may end in between: then the count begins again, and up to 241 are let through.
    const statuses = []
    for (let i = 0; i < 241 && statuses.at(-1) !== 429; i++) statuses.push((await look('CFHJKMNP', '192.0.2.9')).status)
    expect(statuses.slice(0, 120)).toEqual(Array(120).fill(410))
    expect(statuses).toContain(429)
    expect((await look(roomCode, '192.0.2.9')).status).toBe(429)
    expect((await look(roomCode, '192.0.2.10')).status).toBe(200)
  })

  it('and personal codes are, ten times each and sixty times from one address', async () => {
    const { web } = await ownWeb({ RATE_LIMITS: 'true', TRUSTED_PROXIES: '127.0.0.1' })
    const attempt = (personalCode: string) => new Agent(web.address).post('/api/join/return', { personalCode }, { headers: { 'x-forwarded-for': '192.0.2.9' } })
    const statuses = []
    for (let i = 0; i < 21; i++) statuses.push((await attempt('CFHJKMNPRTWX')).status)
    expect(statuses.slice(0, 10)).toEqual(Array(10).fill(410))
    expect(statuses).toContain(429)
    expect((await attempt('CFHJKMNPRTWW')).status).toBe(410)
  })
})

describe('an installation by invitation only', () => {
  it('signs nobody up', async () => {
    const { web, database } = await ownWeb({ REGISTRATION: 'invite' })
    const answer = await new Agent(web.address).post('/api/auth/register', { name: 'Otto Lind', email: 'otto@ropeworks.example', password: 'a long enough one' })
    expect(answer.body).toMatchObject({ statusCode: 403, data: { code: 'registration_closed' } })
    expect((await database.query('select 1 from users')).rows).toEqual([])
  })
})

describe('an open stream of hints', () => {
  it.each([
    ['the membership ends', 'delete from memberships'],
    ['the session is revoked', 'update sessions set revoked_at = now()'],
  ])('is ended when %s', async (_, statement) => {
    const { web, database } = await ownWeb({ HINT_RECHECK_SECONDS: '0.2' })
    const { agent, root } = await newStudio('Rope Works Studio', web.address)
    const reader = (await agent.fetch('GET', `${root}/events`)).body!.getReader()
    expect(new TextDecoder().decode((await reader.read()).value)).toContain('event: resync')
    await database.query(statement)
    while (!(await reader.read()).done);
  })

  it('begins again with resync after the listening connection was lost', async () => {
    const { web, database } = await ownWeb({})
    const { agent, root } = await newStudio('Rope Works Studio', web.address)
    const reader = (await agent.fetch('GET', `${root}/events`)).body!.getReader()
    await reader.read()
    await database.query('select pg_terminate_backend(pid) from pg_stat_activity where datname = current_database() and query ilike \'listen %\'')
    expect(new TextDecoder().decode((await reader.read()).value)).toContain('event: resync')
    await reader.cancel()
  })

  it('is given twenty times to a person', async () => {
    const { web } = await ownWeb({})
    const { agent, root } = await newStudio('Rope Works Studio', web.address)
    const open = await Promise.all(Array.from({ length: 20 }, () => agent.fetch('GET', `${root}/events`)))
    expect(open.map(r => r.status)).toEqual(Array(20).fill(200))
    const one = await agent.get(`${root}/events`)
    expect(one.body.data.code).toBe('too_many_requests')
    await Promise.all(open.map(response => response.body!.cancel()))
    await expect.poll(async () => {
      const again = await agent.fetch('GET', `${root}/events`)
      await again.body!.cancel()
      return again.status
    }).toBe(200)
  })
})

describe('a body past its limit', () => {
  const megabyte = Buffer.alloc(1e6, '0,1\n')
  it.each([
    ['said beforehand', 'Content-Length: 30000000', [megabyte]],
    ['found out on the way', 'Transfer-Encoding: chunked', [Buffer.from(`${megabyte.length.toString(16)}\r\n`), megabyte, Buffer.from('\r\n')]],
  ])('is refused with an answer that reaches a sender who first sends all of it, %s', async (_, length, piece) => {
    const { agent, root } = await newStudio()
    const { body: bench } = await agent.post(`${root}/benches`, { name: 'Loft table', process: 'cyanotype' })
    const { hostname, port } = new URL(agent.address)
    for (let i = 0; i < 5; i++) {
      const socket = connectTo({ host: hostname, port: Number(port) })
      socket.write(`POST ${root}/benches/${bench.id}/readings HTTP/1.1\r\nHost: ${hostname}:${port}\r\nCookie: ${agent.cookieHeader()}\r\nContent-Type: text/csv\r\n${length}\r\n\r\n`)
      for (const bytes of Array<Buffer[]>(30).fill(piece).flat()) {
        if (!socket.write(bytes)) await once(socket, 'drain')
      }
      const [answer] = await once(socket, 'data') as [Buffer]
      expect(answer.toString()).toMatch(/^HTTP\/1.1 413 /)
      socket.destroy()
    }
  })
})
