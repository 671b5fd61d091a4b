import { hostname } from 'node:os'
import { setTimeout as sleep } from 'node:timers/promises'
import PgBoss from 'pg-boss'
import type { Settings } from '../config'
import { openDatabase } from '../db/client'
import { erasePastStudents } from '../services/class-erasure'
import { eraseBinnedPhotos, eraseWhatIsDue } from '../services/erasure'
import { closeImageChildren } from '../services/image-child'
import { jobHandlers, requireHandlers, type JobContext, type JobHandler } from './handlers'
import { type LeaseSettings, type Report, workOnNext } from './leased-work'
import { sendNextLetter } from './letter-work'
import { jobNames, type JobName } from './names'
import { readingWork } from './reading-work'
import { filmWork } from './render-work'
import { shrinkCopies, shrinkFilmCache, shrinkPictureCache, sweepFilms, sweepScans, sweepTemporaryFiles, sweepUploads } from './sweep'

export interface Worker { stop: () => Promise<void> }

/** Work under way may end by itself for this long when the worker is told to stop. */
const graceSeconds = 10
const tidySeconds = 600

/**
 * Makes films, reads scans and sends letters, each kind one after the other, as the rows ask for it: woken by jobs, and looking by itself every few seconds for
 * what a job did not announce (a row whose worker died). Sweeps what dead processes have left.
 */
export async function runWorker(settings: Settings, report: Report = () => {}): Promise<Worker> {
  requireHandlers()
  openDatabase(settings.DATABASE_URL)
  const alarms = { films: openAlarm(), readings: openAlarm(), letters: openAlarm() }
  const boss = await listenForJobs(settings.DATABASE_URL, { wake: kind => alarms[kind].ring() }, report)
  const noMore = new AbortController()
  const breakOff = new AbortController()
  const owner = `${hostname().slice(0, 30).replace(/[^\w-]/g, '-')}-${process.pid}-${crypto.randomUUID().slice(0, 8)}`
  const lease: LeaseSettings = { owner, leaseSeconds: settings.LEASE_SECONDS, renewSeconds: settings.LEASE_RENEW_SECONDS }

  const films = forever(noMore.signal, report, async () => {
    const made = await workOnNext(filmWork, lease, breakOff.signal, report)
    if (made) await shrinkFilmCache(settings.RENDER_CACHE_MAX_BYTES)
    else await alarms.films.next(settings.POLL_SECONDS, noMore.signal)
  })
  const scans = forever(noMore.signal, report, async () => {
    const read = await workOnNext(readingWork, lease, breakOff.signal, report)
    if (!read) await alarms.readings.next(settings.POLL_SECONDS, noMore.signal)
  })
  const mail = forever(noMore.signal, report, async () => {
    if (!await sendNextLetter(report)) await alarms.letters.next(settings.POLL_SECONDS, noMore.signal)
  })
  const sweeping = forever(noMore.signal, report, async () => {
    const swept = await sweepTemporaryFiles(settings.LEASE_SECONDS)
    if (swept.length) report('sweep.temporary', { files: swept.length })
    await pause(settings.LEASE_SECONDS, noMore.signal)
  })
  const tidying = forever(noMore.signal, report, async () => {
    const orphans = await sweepFilms(settings.LEASE_SECONDS)
    if (orphans.length) report('sweep.films', { files: orphans.length })
    const scansLeft = await sweepScans()
    if (scansLeft.length) report('sweep.scans', { files: scansLeft.length })
    const { expired, orphans: lostParts } = await sweepUploads()
    if (expired + lostParts > 0) report('sweep.uploads', { expired, lostParts })
    const binned = await eraseBinnedPhotos()
    if (binned.length) report('sweep.bin', { photos: binned.length })
    await shrinkPictureCache(settings.PICTURE_CACHE_MAX_BYTES)
    await shrinkCopies(settings.S3_COPIES_MAX_BYTES)
    for (const erased of [...await eraseWhatIsDue(), ...await erasePastStudents()]) report('erasure.done', erased)
    await pause(tidySeconds, noMore.signal)
  })

  return {
    async stop() {
      noMore.abort()
      await boss.stop({ graceful: false })
      const late = setTimeout(() => breakOff.abort(), 1000 * graceSeconds)
      await Promise.all([films, scans, mail, sweeping, tidying])
      clearTimeout(late)
      await closeImageChildren()
    },
  }
}

async function listenForJobs(databaseUrl: string, context: JobContext, report: Report): Promise<PgBoss> {
  const boss = new PgBoss({ connectionString: databaseUrl, max: 2, migrate: false, schedule: false })
  boss.on('error', error => report('queue.error', { cause: error.message }))
  await boss.start()
  for (const name of jobNames) await handleJobs(boss, name, context)
  return boss
}

async function handleJobs<N extends JobName>(boss: PgBoss, name: N, context: JobContext): Promise<void> {
  const handle = jobHandlers[name] as JobHandler<N>
  await boss.work<Parameters<JobHandler<N>>[0] & object>(name, { pollingIntervalSeconds: 0.5, batchSize: 20 }, async (jobs) => {
    for (const job of jobs) await handle(job.data, context)
  })
}

/** Repeats a step until told not to; a step that fails is reported and tried again after a second. */
async function forever(end: AbortSignal, report: Report, step: () => Promise<void>): Promise<void> {
  while (!end.aborted) {
    await step().catch(async (error: Error) => {
      report('worker.error', { cause: error.message })
      await pause(1, end)
    })
  }
}

const pause = (seconds: number, end: AbortSignal): Promise<void> => sleep(1000 * seconds, undefined, { signal: end }).catch(() => {})

/** Rings may come while nobody waits; the next wait then ends at once. */
function openAlarm() {
  let rung = false
  let awake: (() => void) | undefined
  return {
    ring() {
      rung = true
      awake?.()
    },
    async next(seconds: number, end: AbortSignal): Promise<void> {
      const early = new AbortController()
      awake = () => early.abort()
      if (!rung) await pause(seconds, AbortSignal.any([end, early.signal]))
      awake = undefined
      rung = false
    },
  }
}
