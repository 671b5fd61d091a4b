import { setTimeout as sleep } from 'node:timers/promises'
import { ComputeError } from '#shared/errors'
import type { readings, renders } from '../db/schema'
import type { CallOptions } from '../image/pool'
import { type Lease, LeaseLost, type Leases, maxTakeUps } from './leases'

export interface LeaseSettings { owner: string, leaseSeconds: number, renewSeconds: number }
export type Report = (event: string, details: Record<string, unknown>) => void

/** Progress is noted this often at most. */
const progressSeconds = 0.5

export class WorkerStops extends Error {}

/** One kind of work: `noun` stands in log lines and sentences, `work` does it and hands it in. */
export interface LeasedWork<T extends typeof renders | typeof readings> {
  noun: 'render' | 'reading'
  leases: Leases<T>
  work: (lease: Lease<T['$inferSelect']>, calls: Required<CallOptions>, settings: LeaseSettings) => Promise<void>
}

/** Works on the next row that waits. False when none does. */
export async function workOnNext<T extends typeof renders | typeof readings>(kind: LeasedWork<T>, settings: LeaseSettings, stopping: AbortSignal, report: Report): Promise<boolean> {
  const { noun, leases } = kind
  const lease = await leases.claim(settings.owner, settings.leaseSeconds)
  if (!lease) return false
  const about = { [noun]: lease.row.id, requestId: lease.row.requestId, fence: lease.row.fence }
  try {
    if (lease.row.fence > maxTakeUps) throw new ComputeError('unavailable', 'The work on this was broken off too often.')
    await workUnderLease(kind, lease, settings, stopping)
    report(`${noun}.ready`, about)
  }
  catch (error) {
    report(`${noun}.${error instanceof WorkerStops ? 'released' : error instanceof LeaseLost ? 'lease-lost' : 'failed'}`, { ...about, cause: (error as Error).message })
    await settle(leases, lease, error)
  }
  return true
}

async function settle<T extends typeof renders | typeof readings>(leases: Leases<T>, lease: Lease<T['$inferSelect']>, error: unknown): Promise<void> {
  if (error instanceof LeaseLost) return
  if (error instanceof WorkerStops) return leases.release(lease)
  if (error instanceof ComputeError) return leases.fail(lease, error, error.code === 'image_child_failed')
  await leases.fail(lease, { code: 'internal', message: 'Something went wrong on our side while this was worked on.' }, true)
}

async function workUnderLease<T extends typeof renders | typeof readings>({ leases, work }: LeasedWork<T>, lease: Lease<T['$inferSelect']>, settings: LeaseSettings, stopping: AbortSignal): Promise<void> {
  const end = new AbortController()
  const onStop = () => end.abort(new WorkerStops('The worker is stopping.'))
  stopping.addEventListener('abort', onStop)
  if (stopping.aborted) onStop()
  let progress = 0
  const renewing = keepLease(leases, lease, settings, end, () => progress)
  try {
    await work(lease, { signal: end.signal, onProgress: fraction => progress = fraction }, settings)
  }
  finally {
    stopping.removeEventListener('abort', onStop)
    end.abort()
    await renewing
  }
}

/** Renews the lease until the work ends; ends the work when the lease is lost or can't be renewed in time. */
async function keepLease<T extends typeof renders | typeof readings>(leases: Leases<T>, lease: Lease<T['$inferSelect']>, { leaseSeconds, renewSeconds }: LeaseSettings, end: AbortController, progress: () => number): Promise<void> {
  let renewedAt = Date.now()
  while (!end.signal.aborted) {
    await sleep(1000 * Math.min(progressSeconds, renewSeconds), undefined, { signal: end.signal }).catch(() => {})
    const due = Date.now() - renewedAt >= 1000 * renewSeconds || progress() !== lease.row.progress
    if (end.signal.aborted || !due) continue
    try {
      await leases.renew(lease, progress())
      renewedAt = Date.now()
    }
    catch (error) {
      if (error instanceof LeaseLost || Date.now() - renewedAt > 1000 * leaseSeconds) end.abort(new LeaseLost())
    }
  }
}
