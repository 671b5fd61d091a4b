import { createHash } from 'node:crypto'
import { existsSync, readdirSync, readFileSync } from 'node:fs'
import { setTimeout as sleep } from 'node:timers/promises'
import { describe, expect, it } from 'vitest'
import { filmOf, newNegative, newPhoto, type InStudio } from '../support/negatives'
import { ownInstallation } from '../support/own-installation'

const leaseSeconds = 1
const kills = 10
/** Large enough to be caught in the making. */
const size = { widthMm: 200, heightMm: 200 }

type Installation = Awaited<ReturnType<typeof ownInstallation>>
type Worker = ReturnType<Installation['worker']>
interface RenderRow { id: string, render_key: string, format: string, state: string, fence: number, failures: number, lease_owner: string | null, sha256: string, bytes: string, ready_at: Date }

const rendersOf = ({ rows }: Installation) =>
  rows('select id, render_key, format, state, fence, failures, lease_owner, sha256, bytes::text, ready_at from renders order by created_at') as Promise<RenderRow[]>
const newest = async (installation: Installation) => (await rendersOf(installation)).at(-1)
const temporaryFiles = ({ inStorage }: Installation) => existsSync(inStorage('temporary')) ? readdirSync(inStorage('temporary')) : []
const sha256 = (bytes: Buffer) => createHash('sha256').update(bytes).digest('hex')
const logLines = (worker: Worker, ...parts: string[]) => worker.log().split('\n').filter(line => parts.every(part => line.includes(part)))

/** A worker that is up: its process id stands in its log lines and in the name of its lease. */
async function startWorker(installation: Installation): Promise<Worker> {
  const worker = installation.worker()
  await expect.poll(() => logLines(worker, `"worker-${worker.child.pid}"`, 'worker.started').length, { timeout: 30_000 }).toBe(1)
  return worker
}

async function askForFilm(studio: InStudio, photoId: string, midtone: number, format: string) {
  const negative = await newNegative(studio, { photoId, size, adjustments: { midtone } })
  await studio.agent.get(`${studio.root}/negatives/${negative.id}/file?format=${format}`)
  return negative
}

/** The newest film, once one of these workers is making it; undefined when it is ready before that was seen. */
async function inTheMaking(installation: Installation, workers: Worker[], afterFence = 0) {
  for (const deadline = Date.now() + 30_000; Date.now() < deadline; await sleep(10)) {
    const row = await newest(installation)
    const holder = workers.find(worker => row?.lease_owner?.includes(`-${worker.child.pid}-`))
    if (row?.state === 'making' && row.fence > afterFence && holder) return { row, holder }
    if (row?.state === 'ready' && row.fence > afterFence) return undefined
  }
  throw new Error(`Nobody took the film up within 30 s; its row says ${(await newest(installation))?.state}.`)
}

describe('workers that die', () => {
  it(`lose nothing in ${kills} kills: each film is ready once, with its hash, taken up within two leases`, async () => {
    const installation = await ownInstallation()
    const web = await installation.web()
    const studio = await installation.studioAt(web)
    const photo = await newPhoto(studio, { width: 2400, height: 2400 })
    const workers = [await startWorker(installation), await startWorker(installation)]
    const takenUpAfterSeconds: number[] = []

    for (let film = 0; takenUpAfterSeconds.length < kills; film++) {
      const format = film % 2 ? 'png' : 'tiff'
      const negative = await askForFilm(studio, photo.id, film / 50, format)
      const making = await inTheMaking(installation, workers)
      if (!making) continue
      await sleep(60 * (film % 5))
      const { row, holder } = making
      holder.child.kill('SIGKILL')
      const killedAt = Date.now()
      workers.splice(workers.indexOf(holder), 1)
      if ((await newest(installation))!.state === 'making') {
        await inTheMaking(installation, workers, row.fence)
        takenUpAfterSeconds.push((Date.now() - killedAt) / 1000)
      }
      workers.push(await startWorker(installation))
      await filmOf(studio, negative.id, format)
    }

    expect(Math.max(...takenUpAfterSeconds), `taken up after ${takenUpAfterSeconds.join(', ')} s`).toBeLessThanOrEqual(2 * leaseSeconds)
    const films = await rendersOf(installation)
    for (const film of films) {
      const bytes = readFileSync(installation.inStorage('films', studio.ids.studio, `${film.render_key}.${film.format}`))
      expect({ state: film.state, sha256: film.sha256, bytes: film.bytes }).toEqual({ state: 'ready', sha256: sha256(bytes), bytes: String(bytes.length) })
      expect(logLines(workers[0]!, 'render.ready', film.id)).toHaveLength(1)
    }
    expect(films.filter(film => film.fence > 1)).toHaveLength(kills)
    expect(readdirSync(installation.inStorage('films', studio.ids.studio))).toHaveLength(films.length)
    await expect.poll(() => temporaryFiles(installation), { timeout: 10_000 }).toEqual([])
    for (const worker of workers) await worker.stop()
    await web.stop()
  }, 300_000)
})

describe('a worker that comes back after it lost its lease', () => {
  it('can’t hand in what it made', async () => {
    const installation = await ownInstallation()
    const web = await installation.web()
    const studio = await installation.studioAt(web)
    const workers = [await startWorker(installation), await startWorker(installation)]
    const negative = await askForFilm(studio, (await newPhoto(studio, { width: 2400, height: 2400 })).id, 0, 'tiff')
    const { row, holder } = (await inTheMaking(installation, workers))!
    // Its image child goes on meanwhile, and has the film ready when the worker wakes up.
    holder.child.kill('SIGSTOP')
    await inTheMaking(installation, workers.filter(worker => worker !== holder), row.fence)
    const film = await filmOf(studio, negative.id)
    const ready = await newest(installation)

    holder.child.kill('SIGCONT')
    await expect.poll(() => logLines(holder, 'render.lease-lost', row.id).length, { timeout: 20_000 }).toBe(1)
    expect(await newest(installation)).toEqual(ready)
    expect(ready!.fence).toBe(row.fence + 1)
    expect((await filmOf(studio, negative.id)).bytes.equals(film.bytes)).toBe(true)
    await expect.poll(() => temporaryFiles(installation), { timeout: 10_000 }).toEqual([])
    for (const worker of workers) await worker.stop()
    await web.stop()
  }, 120_000)
})

describe('a worker that is told to stop', () => {
  it('ends the film it makes or gives it back, and leaves nothing', async () => {
    const installation = await ownInstallation()
    const web = await installation.web()
    const studio = await installation.studioAt(web)
    const worker = await startWorker(installation)
    await askForFilm(studio, (await newPhoto(studio, { width: 2400, height: 2400 })).id, 0, 'tiff')
    expect(await inTheMaking(installation, [worker])).toBeDefined()
    await worker.stop()
    const row = (await newest(installation))!
    expect(['ready', 'waiting']).toContain(row.state)
    expect(row.lease_owner).toBeNull()
    expect(temporaryFiles(installation)).toEqual([])
    await web.stop()
  }, 120_000)
})

describe('a film whose image child dies', () => {
  it('is tried three times, then fails with the cause', async () => {
    const installation = await ownInstallation()
    const web = await installation.web()
    const studio = await installation.studioAt(web)
    const negative = await askForFilm(studio, (await newPhoto(studio)).id, 0, 'tiff')
    // A child that is allowed no time at all is ended with its job, each time.
    const worker = installation.worker({ CHILD_TIMEOUT_SECONDS: '0.001' })
    const film = await filmOf(studio, negative.id)
    expect(film.status).toBe(503)
    expect(JSON.parse(film.bytes.toString())).toMatchObject({ data: { code: 'image_child_failed' } })
    expect(await newest(installation)).toMatchObject({ state: 'failed', fence: 3, failures: 3 })
    await worker.stop()
    await web.stop()
  }, 120_000)
})
