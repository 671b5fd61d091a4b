import { setTimeout as sleep } from 'node:timers/promises'
import { describe, expect, it } from 'vitest'
import { ownInstallation } from '../support/own-installation'
import { newWedge, printOfChart, scanFile, scanForm, scanOf } from '../support/wedge-scans'

interface Row { id: string, state: string, fence: number, lease_owner: string | null, patches: unknown[] }

describe('a reading', () => {
  it('whose worker is killed in the middle is taken up by another, and handed in once', async () => {
    const installation = await ownInstallation()
    const web = await installation.web({ READING_WAIT_SECONDS: '0.01' })
    const studio = await installation.studioAt(web)
    const { wedgeId, chart } = await newWedge(studio)
    const bytes = await scanFile(scanOf(printOfChart(chart), chart, { pixelsPerInch: 450 }), 'tiff16')
    const asked = await studio.agent.call('POST', `${studio.root}/wedges/${wedgeId}/readings`, { body: scanForm(bytes, { printNumber: '2' }) })
    // Nobody works yet: the answer does not wait for ever.
    expect([asked.status, asked.body.state, asked.body.progress]).toEqual([202, 'waiting', 0])
    const reading = async () => (await installation.rows('select id, state, fence, lease_owner, patches from readings'))[0] as Row

    const first = installation.worker()
    for (const deadline = Date.now() + 60_000; (await reading()).state !== 'making';) {
      if (Date.now() > deadline) throw new Error('Nobody took the reading up within a minute.')
      await sleep(10)
    }
    first.child.kill('SIGKILL')
    expect((await reading()).state).toBe('making')
    const second = installation.worker()
    await expect.poll(async () => (await reading()).state, { timeout: 120_000 }).toBe('ready')
    expect(await reading()).toMatchObject({ fence: 2, lease_owner: null })
    expect((await reading()).patches).toHaveLength(chart.levels.length)
    expect(second.log().split('\n').filter(line => line.includes('reading.ready'))).toHaveLength(1)
    const shown = (await studio.agent.get(`${studio.root}/readings/${asked.body.id}`)).body
    expect(shown).toMatchObject({ state: 'ready', progress: 1, printNumber: 2, warnings: [] })
    await second.stop()
    await web.stop()
  }, 300_000)

  it('whose image child dies fails after three tries, keeps its file, and is read when asked again', async () => {
    const installation = await ownInstallation()
    const web = await installation.web({ READING_WAIT_SECONDS: '60' })
    const studio = await installation.studioAt(web)
    const { wedgeId, chart } = await newWedge(studio)
    const hasty = installation.worker({ CHILD_TIMEOUT_SECONDS: '0.001' })
    const { status, body } = await studio.agent.call('POST', `${studio.root}/wedges/${wedgeId}/readings`, { body: scanForm(await scanFile(scanOf(printOfChart(chart), chart))) })
    expect(status).toBe(201)
    expect(body).toMatchObject({ state: 'failed', error: { code: 'image_child_failed' } })
    await hasty.stop()
    const patient = installation.worker()
    const again = await studio.agent.post(`${studio.root}/readings/${body.id}/read-again`, {})
    expect([again.status, again.body.state, again.body.error]).toEqual([200, 'ready', null])
    await patient.stop()
    await web.stop()
  }, 300_000)
})
