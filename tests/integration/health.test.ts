import { describe, expect, it } from 'vitest'
import { Agent } from '../support/studio'

describe('health', () => {
  it('says that the process answers', async () => {
    const answer = await new Agent().get('/api/health/live')
    expect(answer.status).toBe(200)
    expect(answer.body).toEqual({ status: 'ok' })
  })

  it('says that database and storage answer', async () => {
    const answer = await new Agent().get('/api/health/ready')
    expect(answer.status).toBe(200)
    expect(answer.body).toEqual({ status: 'ok' })
  })
})

describe('metrics', () => {
  it('count requests by route pattern, method and status', async () => {
    const agent = new Agent()
    const count = async () => Number(/emulside_request_seconds_count\{method="GET",route="\/api\/me",status="401"\} (\d+)/.exec((await agent.get('/metrics')).text)?.[1] ?? 0)
    const before = await count()
    expect((await agent.get('/api/me')).status).toBe(401)
    await expect.poll(count).toBe(before + 1)
  })

  it('are not for requests that came through a proxy', async () => {
    const answer = await new Agent().get('/metrics', { headers: { 'x-forwarded-for': '192.0.2.7' } })
    expect(answer.status).toBe(404)
    expect(answer.text).not.toContain('emulside_request_seconds')
  })
})
