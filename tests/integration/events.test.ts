import { randomUUID } from 'node:crypto'
import { describe, expect, it } from 'vitest'
import { sql } from '../support/database'
import { listen } from '../support/hints'
import { newPersonIn } from '../support/people'
import { newStudio } from '../support/studio'

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
