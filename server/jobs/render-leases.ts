import { and, eq, inArray, isNull, lt, or, sql } from 'drizzle-orm'
import { db } from '../db/client'
import { renders } from '../db/schema'
import { hintRender, type RenderRow } from '../services/renders'

/** What a worker holds while it makes a film: the row is its own until the lease runs out. */
export interface RenderLease { row: RenderRow, owner: string, leaseSeconds: number }

/** Another worker may have the film: what this one made must not be handed in. */
export class LeaseLost extends Error {
  constructor() {
    super('The lease on this film has run out and somebody else may have taken it up.')
    this.name = 'LeaseLost'
  }
}

/** A film that kills its image child this often is not tried again by itself. */
export const maxFailures = 3
/** Nor is one that was taken up this often without an end: it may be what ends the workers. */
export const maxTakeUps = 25

const until = (seconds: number) => sql`now() + make_interval(secs => ${seconds})`

/** Takes up the film that has waited longest, or one whose worker is gone. */
export async function claimRender(owner: string, leaseSeconds: number): Promise<RenderLease | undefined> {
  return db().transaction(async (tx) => {
    const [next] = await tx.select({ studioId: renders.studioId, id: renders.id }).from(renders)
      .where(and(inArray(renders.state, ['waiting', 'making']), or(isNull(renders.leaseUntil), lt(renders.leaseUntil, sql`now()`))))
      .orderBy(renders.createdAt).limit(1).for('update', { skipLocked: true })
    if (!next) return undefined
    const [row] = await tx.update(renders)
      .set({ state: 'making', progress: 0, leaseOwner: owner, leaseUntil: until(leaseSeconds), fence: sql`${renders.fence} + 1` })
      .where(and(eq(renders.studioId, next.studioId), eq(renders.id, next.id))).returning()
    await hintRender(tx, row!)
    return { row: row!, owner, leaseSeconds }
  })
}

/** True only for the row as this worker took it up. */
const held = ({ row, owner }: RenderLease) =>
  and(eq(renders.studioId, row.studioId), eq(renders.id, row.id), eq(renders.state, 'making'), eq(renders.leaseOwner, owner), eq(renders.fence, row.fence))

/** Renews the lease and notes progress; throws LeaseLost. */
export async function renewLease(lease: RenderLease, progress: number): Promise<void> {
  const rows = await db().update(renders).set({ leaseUntil: until(lease.leaseSeconds), progress }).where(held(lease)).returning({ id: renders.id })
  if (rows.length === 0) throw new LeaseLost()
  if (progress !== lease.row.progress) await hintRender(db(), lease.row)
  lease.row.progress = progress
}

/** Hands the film in: its file is put in place under the row's lock, and only by who still holds the lease. */
export async function commitRender(lease: RenderLease, made: { bytes: number, sha256: string }, putInPlace: () => Promise<void>): Promise<void> {
  await db().transaction(async (tx) => {
    const [row] = await tx.select({ id: renders.id }).from(renders).where(held(lease)).for('update')
    if (!row) throw new LeaseLost()
    await putInPlace()
    await tx.update(renders)
      .set({ state: 'ready', progress: 1, ...made, leaseOwner: null, leaseUntil: null, errorCode: null, errorMessage: null, readyAt: sql`now()`, lastUsedAt: sql`now()` })
      .where(held(lease))
    await hintRender(tx, lease.row)
  })
}

/** Gives the film back untouched, for the next worker: this one is stopping. */
export async function releaseRender(lease: RenderLease): Promise<void> {
  await db().update(renders).set({ state: 'waiting', progress: 0, leaseOwner: null, leaseUntil: null }).where(held(lease))
}

/** An order or a photo that can't be worked on fails at once; a crash is tried again after a pause that grows. */
export async function failRender(lease: RenderLease, error: { code: string, message: string }, isCrash: boolean): Promise<void> {
  const failures = lease.row.failures + 1
  const goesOn = isCrash && failures < maxFailures
  await db().transaction(async (tx) => {
    await tx.update(renders).set(goesOn
      ? { state: 'waiting', progress: 0, failures, leaseOwner: null, leaseUntil: until(failures * lease.leaseSeconds / 10) }
      : { state: 'failed', failures, leaseOwner: null, leaseUntil: null, errorCode: error.code, errorMessage: error.message },
    ).where(held(lease))
    await hintRender(tx, lease.row)
  })
}
