import { join } from 'node:path'
import { describe, expect, it, onTestFinished } from 'vitest'
import { builtPrograms } from '../../server/cli/paths.mjs'
import { startWeb } from '../support/application'
import { newDatabase, newFolder } from '../support/house'
import { Agent, newStudio } from '../support/studio'

async function ownWeb(env: Record<string, string> = {}) {
  const web = await startWeb({ programs: builtPrograms, databaseUrl: await newDatabase('migrated'), storage: join(newFolder(), 'files'), env })
  onTestFinished(() => web.kill())
  const lines = () => web.log().split('\n').filter(Boolean).map(line => JSON.parse(line))
  return { ...web, lines }
}

describe('logs', () => {
  it('are JSON lines with the id that the answer carries, without what people typed', async () => {
    const web = await ownWeb()
    const agent = new Agent(web.address)
    const answer = await agent.post('/api/auth/login', { email: 'somebody@elsewhere.example', password: 'not the right password' }, { headers: { authorization: 'Bearer emu_secret' } })
    expect(answer.status).toBe(401)
    const requestId = answer.headers.get('x-request-id')
    await expect.poll(() => web.lines().find(line => line.requestId === requestId)).toMatchObject({ event: 'request', method: 'POST', route: '/api/auth/login', status: 401 })
    for (const typed of ['somebody@elsewhere.example', 'not the right password', 'emu_secret']) expect(JSON.stringify(web.lines())).not.toContain(typed)
    const aboutRequests = web.lines().filter(line => line.requestId !== undefined)
    expect(JSON.stringify(aboutRequests)).not.toContain('127.0.0.1')
  })
})

describe('web, told to stop', () => {
  it('ends its event streams and is gone within ten seconds', async () => {
    const web = await ownWeb()
    const { agent, root } = await newStudio('Rope Works Studio', web.address)
    const stream = await agent.fetch('GET', `${root}/events`)
    expect(stream.status).toBe(200)
    const reader = stream.body!.getReader()
    await reader.read()
    const started = Date.now()
    const ended = (async () => {
      while (!(await reader.read()).done);
    })()
    await web.stop()
    await ended
    expect(Date.now() - started).toBeLessThan(10_000)
    expect(web.child.exitCode).toBe(0)
  })
})
