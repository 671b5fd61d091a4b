import { describe, expect, it } from 'vitest'
import { Agent } from '../support/studio'

describe('health', () => {
  it('says that the process answers', async () => {
    const answer = await new Agent().get('/api/health/live')
    expect(answer.status).toBe(200)
    expect(answer.body).toEqual({ status: 'ok' })
  })
  it('says that database and storage answer', async () => {
    expect((await new Agent().get('/api/health/ready')).body).toEqual({ status: 'ok' })
  })
})
