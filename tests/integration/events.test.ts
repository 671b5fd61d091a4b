import { randomUUID } from 'node:crypto'
import { describe, expect, it } from 'vitest'
import { sql } from '../support/database'
import { newPersonIn } from '../support/people'
import { type Agent, newStudio } from '../support/studio'

interface Said { event: string, data: { topic?: string, id?: string, revision?: number }, at: number }

/** Listens to a studio's stream; `until` waits for something to have been said. */
async function listen(agent: Agent, root: string) {
  const response = await agent.fetch('GET', `${root}/events`, { headers: { accept: 'text/event-stream' } })
  expect(response.headers.get('content-type')).toContain('text/event-stream')
  const reader = response.body!.getReader()
  const said: Said[] = []
  let ended = false
  const waiting = new Set<() => void>()
  void (async () => {
    const decoder = new TextDecoder()
    let rest = ''
    for (let chunk = await reader.read(); !chunk.done; chunk = await reader.read()) {
      const parts = (rest + decoder.decode(chunk.value, { stream: true })).split('\n\n')
      rest = parts.pop()!
      for (const part of parts) {
        const field = (name: string) => new RegExp(`^${name}: ?(.*)$`, 'm').exec(part)?.[1]
        said.push({ event: field('event') ?? 'message', data: JSON.parse(field('data')!), at: performance.now() })
      }
      for (const wake of waiting) wake()
    }
    ended = true
    for (const wake of waiting) wake()
  })().catch(() => { ended = true })
  const until = (is: () => boolean) => new Promise<void>((resolve, reject) => {
    const late = setTimeout(() => reject(new Error(`Not said within 10 s; said: ${JSON.stringify(said)}`)), 10_000)
    const look = () => {
      if (!is()) return
      clearTimeout(late)
      waiting.delete(look)
      resolve()
    }
    waiting.add(look)
    look()
  })
  await until(() => said.length > 0)
  return { said, until, hints: () => said.filter(s => s.event === 'message').map(s => s.data), isEnded: () => ended, leave: () => reader.cancel() }
}

describe('the stream of hints', () => {
  it('begins with resync, then says what has changed, without content', async () => {
    const { agent, root } = await newStudio()
    const stream = await listen(agent, root)
    expect(stream.said[0]!.event).toBe('resync')
    const { id } = (await agent.post(`${root}/papers`, { name: 'Secret cotton' })).body
    await stream.until(() => stream.hints().length > 0)
    expect(stream.hints()).toEqual([{ topic: 'papers', id, revision: 1 }])
    await stream.leave()
  })

  it('says nothing of a change that did not happen, and nothing of other studios', async () => {
    const [{ agent, root }, other] = [await newStudio(), await newStudio()]
    const stream = await listen(agent, root)
    await agent.post(`${root}/benches`, { name: 'Window', process: 'salt', baseExposure: { value: 1, unit: 's' }, paperId: randomUUID() })
    await other.agent.post(`${other.root}/papers`, { name: 'Cotton' })
    const { id } = (await agent.post(`${root}/papers`, { name: 'Last' })).body
    await stream.until(() => stream.hints().some(h => h.id === id))
    expect(stream.hints()).toEqual([{ topic: 'papers', id, revision: 1 }])
    await stream.leave()
  })

  it('tells of private records to their own person only', async () => {
    const owner = await newStudio()
    const member = await newPersonIn(owner.ids.studio, 'member')
    const [ownerStream, memberStream] = [await listen(owner.agent, owner.root), await listen(member.agent, owner.root)]
    const notify = (hint: object) => sql('select pg_notify(\'emulside_hints\', $1)', [JSON.stringify({ studioId: owner.ids.studio, ...hint })])
    await notify({ topic: 'photos', id: 'theirs', revision: 1, onlyFor: member.ids.user })
    await notify({ topic: 'papers', id: 'everybody’s', revision: 1 })
    for (const stream of [ownerStream, memberStream]) await stream.until(() => stream.hints().some(h => h.topic === 'papers'))
    expect(ownerStream.hints().map(h => h.topic)).toEqual(['papers'])
    expect(memberStream.hints().map(h => h.topic)).toEqual(['photos', 'papers'])
    await Promise.all([ownerStream.leave(), memberStream.leave()])
  })

  it('speaks of one record at most twice a second, and always of its last state', async () => {
    const { agent, root, ids } = await newStudio()
    const stream = await listen(agent, root)
    await sql(`select pg_notify('emulside_hints', json_build_object('studioId', $1::text, 'topic', 'renders', 'id', 'r', 'revision', i)::text), pg_sleep(0.01) from generate_series(1, 120) as i`, [ids.studio])
    await stream.until(() => stream.hints().some(h => h.revision === 120))
    const times = stream.said.filter(s => s.event === 'message').map(s => s.at)
    for (let i = 1; i < times.length; i++) expect(times[i]! - times[i - 1]!).toBeGreaterThan(450)
    await stream.leave()
  })
})
