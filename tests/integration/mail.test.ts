import { randomUUID } from 'node:crypto'
import { describe, expect, it } from 'vitest'
import { mailServer } from '../support/mail-server'
import { ownInstallation } from '../support/own-installation'
import type { newStudio } from '../support/studio'

const waits = { timeout: 30_000, interval: 50 }
type Studio = Awaited<ReturnType<typeof newStudio>>

async function invite({ agent, root }: Studio): Promise<string> {
  const email = `${randomUUID()}@ropeworks.example`
  expect((await agent.post(`${root}/invitations`, { email, role: 'member' })).status).toBe(201)
  return email
}

describe('letters on their way', () => {
  it('arrive once each, with text, HTML and a link that works, and leave no secret in the outbox', async () => {
    const mail = await mailServer()
    const installation = await ownInstallation()
    const studio = await installation.studioAt(await installation.web({ SMTP_URL: mail.url }))
    installation.worker({ SMTP_URL: mail.url })
    const addresses = await Promise.all(Array.from({ length: 5 }, () => invite(studio)))
    await expect.poll(() => mail.received.length, waits).toBe(5)
    expect(mail.received.map(letter => letter.to).sort()).toEqual(addresses.sort())
    const [{ text, html, messageId }] = mail.received as [typeof mail.received[0]]
    const [, secret] = /#([\w-]{43})/.exec(text)!
    expect(html).toContain(secret)
    expect((await studio.agent.post('/api/invitations/look', { token: secret })).status).toBe(200)
    await expect.poll(() => installation.rows('select count(*)::int as n from letters where state = \'sent\''), waits).toEqual([{ n: 5 }])
    const [row] = await installation.rows('select * from letters where message_id = $1', [messageId])
    expect(row).toMatchObject({ text: '', html: '', attempts: 1 })
  })

  it('come again after the server died before taking them, and twice only where it died after', async () => {
    const mail = await mailServer()
    mail.dies('before', 'before', 'after')
    const installation = await ownInstallation()
    const studio = await installation.studioAt(await installation.web({ SMTP_URL: mail.url }))
    installation.worker({ SMTP_URL: mail.url })
    const addresses = [await invite(studio), await invite(studio), await invite(studio)]
    await expect.poll(() => installation.rows('select count(*)::int as n from letters where state = \'sent\''), waits).toEqual([{ n: 3 }])
    expect([...new Set(mail.received.map(letter => letter.to))].sort()).toEqual(addresses.sort())
    expect(mail.received).toHaveLength(4)
    expect(new Set(mail.received.map(letter => letter.messageId)).size).toBe(3)
  })

  it('are not lost with a worker that is killed', async () => {
    const mail = await mailServer()
    const installation = await ownInstallation()
    const studio = await installation.studioAt(await installation.web({ SMTP_URL: mail.url }))
    const first = installation.worker({ SMTP_URL: mail.url })
    await expect.poll(() => first.log(), waits).toContain('worker.started')
    const addresses = await Promise.all(Array.from({ length: 8 }, () => invite(studio)))
    first.kill()
    installation.worker({ SMTP_URL: mail.url })
    await expect.poll(() => installation.rows('select count(*)::int as n from letters where state = \'sent\''), waits).toEqual([{ n: 8 }])
    expect([...new Set(mail.received.map(letter => letter.to))].sort()).toEqual(addresses.sort())
  })
})

describe('erasure', () => {
  it('takes a studio with its files and letters, after the time of grace, and leaves the others', async () => {
    const installation = await ownInstallation()
    const web = await installation.web({ ERASURE_GRACE_DAYS: '0' })
    const [going, staying] = [await installation.studioAt(web), await installation.studioAt(web)]
    for (const studio of [going, staying]) await studio.agent.post(`${studio.root}/papers`, { name: 'Cotton' })
    expect((await going.agent.post(`${going.root}/erasure`, { name: going.studio.name })).status).toBe(200)
    installation.worker({ ERASURE_GRACE_DAYS: '0' })
    await expect.poll(() => installation.rows('select id from studios'), waits).toEqual([{ id: staying.ids.studio }])
    expect(await installation.rows('select studio_id from papers')).toEqual([{ studio_id: staying.ids.studio }])
    expect((await going.agent.get(going.root)).status).toBe(404)
    expect((await staying.agent.get(staying.root)).status).toBe(200)
  })

  it('of an account takes its own studio, and its name out of others', async () => {
    const installation = await ownInstallation()
    const web = await installation.web({ ERASURE_GRACE_DAYS: '0' })
    const person = await installation.studioAt(web)
    expect((await person.agent.post('/api/me/erasure')).status).toBe(200)
    installation.worker({ ERASURE_GRACE_DAYS: '0' })
    await expect.poll(() => installation.rows('select name, email, password_hash from users'), waits).toEqual([{ name: 'Erased account', email: `${person.ids.user}@erased.invalid`, password_hash: null }])
    expect(await installation.rows('select 1 from studios')).toEqual([])
    expect((await person.agent.get('/api/me')).status).toBe(401)
  })
})
