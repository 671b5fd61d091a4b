import { setTimeout as sleep } from 'node:timers/promises'
import { ComputeError } from '#shared/errors'
import type { CallOptions } from '../image/pool'
import { filmChild } from '../services/image-child'
import type { RenderRow } from '../services/renders'
import { storage } from '../services/storage'
import { storageKeys } from '../storage'
import { claimRender, commitRender, failRender, LeaseLost, maxTakeUps, releaseRender, renewLease, type RenderLease } from './render-leases'

export interface RenderWorkSettings { owner: string, leaseSeconds: number, renewSeconds: number }

/** Progress is noted this often at most. */
const progressSeconds = 0.5

export class WorkerStops extends Error {}

/** Makes the next film that waits. False when none does. */
export async function makeNextRender(settings: RenderWorkSettings, stopping: AbortSignal, report: (event: string, details: Record<string, unknown>) => void): Promise<boolean> {
  const lease = await claimRender(settings.owner, settings.leaseSeconds)
  if (!lease) return false
  const about = { render: lease.row.id, requestId: lease.row.requestId, fence: lease.row.fence }
  try {
    if (lease.row.fence > maxTakeUps) throw new ComputeError('unavailable', 'The work on this film was broken off too often.')
    await makeFilm(lease, settings, stopping)
    report('render.ready', about)
  }
  catch (error) {
    report(`render.${error instanceof WorkerStops ? 'released' : error instanceof LeaseLost ? 'lease-lost' : 'failed'}`, { ...about, cause: (error as Error).message })
    await settle(lease, error)
  }
  return true
}

async function settle(lease: RenderLease, error: unknown): Promise<void> {
  if (error instanceof LeaseLost) return
  if (error instanceof WorkerStops) return releaseRender(lease)
  if (error instanceof ComputeError) return failRender(lease, error, error.code === 'image_child_failed')
  await failRender(lease, { code: 'internal', message: 'Something went wrong on our side while this film was made.' }, true)
}

async function makeFilm(lease: RenderLease, settings: RenderWorkSettings, stopping: AbortSignal): Promise<void> {
  const { studioId, renderKey, format } = lease.row
  const file = await storage().temporary(`film_${settings.owner}`)
  const work = new AbortController()
  const onStop = () => work.abort(new WorkerStops('The worker is stopping.'))
  stopping.addEventListener('abort', onStop)
  if (stopping.aborted) onStop()
  let progress = 0
  const renewing = keepLease(lease, settings, work, () => progress)
  try {
    const made = await callFor(lease.row, file.path, { signal: work.signal, onProgress: fraction => progress = fraction })
    await commitRender(lease, made, () => file.keep(storageKeys.film(studioId, renderKey, format)))
  }
  finally {
    stopping.removeEventListener('abort', onStop)
    work.abort()
    await renewing
    await file.discard()
  }
}

/** A negative's film is made of its photo, a wedge's of its record alone. */
function callFor({ studioId, photoId, renderKey, order }: RenderRow, target: string, options: CallOptions) {
  if (!('geometry' in order)) return filmChild().call('wedgeFilm', { target, order, renderKey }, options)
  if (photoId === null) throw new ComputeError('unavailable', 'This film has no photo to be made of.')
  return filmChild().call('film', { path: storage().pathOf(storageKeys.original(studioId, photoId)), target, order, renderKey }, options)
}

/** Renews the lease until the work ends; ends the work when the lease is lost or can't be renewed in time. */
async function keepLease(lease: RenderLease, { leaseSeconds, renewSeconds }: RenderWorkSettings, work: AbortController, progress: () => number): Promise<void> {
  let renewedAt = Date.now()
  while (!work.signal.aborted) {
    await sleep(1000 * Math.min(progressSeconds, renewSeconds), undefined, { signal: work.signal }).catch(() => {})
    const due = Date.now() - renewedAt >= 1000 * renewSeconds || progress() !== lease.row.progress
    if (work.signal.aborted || !due) continue
    try {
      await renewLease(lease, progress())
      renewedAt = Date.now()
    }
    catch (error) {
      if (error instanceof LeaseLost || Date.now() - renewedAt > 1000 * leaseSeconds) work.abort(new LeaseLost())
    }
  }
}
