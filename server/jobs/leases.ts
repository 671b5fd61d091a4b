import { and, eq, inArray, isNull, lt, or, sql } from 'drizzle-orm'
import { db, type Queryable, type Transaction } from '../db/client'
import type { readings, renders } from '../db/schema'

/** The tables whose rows are work: state, progress, lease and fence stand in columns of the same names. */
type WorkTable = typeof renders | typeof readings

/** What a worker holds while it works on a row: the row is its own until the lease runs out. */
export interface Lease<Row> { row: Row, owner: string, leaseSeconds: number }

/** Another worker may have the row: what this one made must not be handed in. */
export class LeaseLost extends Error {
  constructor() {
    super('The lease on this work has run out and somebody else may have taken it up.')
    this.name = 'LeaseLost'
  }
}

/** Work that kills its image child this often is not tried again by itself. */
export const maxFailures = 3
/** Nor is what was taken up this often without an end: it may be what ends the workers. */
export const maxTakeUps = 25

const until = (seconds: number) => sql`now() + make_interval(secs => ${seconds})`

/** The taking up, renewing and handing in of one table's rows; `tell` says that a row has changed. */
export function leasesOf<T extends WorkTable>(of: T, tell: (on: Queryable, row: T['$inferSelect']) => Promise<void>) {
  type Row = T['$inferSelect']
  type Held = Lease<Row>
  // All columns named here are in both tables; the library's types know one table at a time.
  const table = of as typeof renders
  const changed = (on: Queryable, lease: Held) => tell(on, lease.row)

  /** True only for the row as this worker took it up. */
  const held = ({ row, owner }: Held) =>
    and(eq(table.studioId, row.studioId), eq(table.id, row.id), eq(table.state, 'making'), eq(table.leaseOwner, owner), eq(table.fence, row.fence))

  return {
    /** Takes up the row that has waited longest, or one whose worker is gone. */
    async claim(owner: string, leaseSeconds: number): Promise<Held | undefined> {
      return db().transaction(async (tx) => {
        const [next] = await tx.select({ studioId: table.studioId, id: table.id }).from(table)
          .where(and(inArray(table.state, ['waiting', 'making']), or(isNull(table.leaseUntil), lt(table.leaseUntil, sql`now()`))))
          .orderBy(table.createdAt).limit(1).for('update', { skipLocked: true })
        if (!next) return undefined
        const [row] = await tx.update(table)
          .set({ state: 'making', progress: 0, leaseOwner: owner, leaseUntil: until(leaseSeconds), fence: sql`${table.fence} + 1` })
          .where(and(eq(table.studioId, next.studioId), eq(table.id, next.id))).returning()
        const lease = { row: row as Row, owner, leaseSeconds }
        await changed(tx, lease)
        return lease
      })
    },

    /** Renews the lease and notes progress; throws LeaseLost. */
    async renew(lease: Held, progress: number): Promise<void> {
      const rows = await db().update(table).set({ leaseUntil: until(lease.leaseSeconds), progress }).where(held(lease)).returning({ id: table.id })
      if (rows.length === 0) throw new LeaseLost()
      if (progress !== lease.row.progress) await changed(db(), lease)
      lease.row.progress = progress
    },

    /** Notes what the work has found out so far; throws LeaseLost. */
    async note(lease: Held, found: Partial<Row>): Promise<void> {
      const [row] = await db().update(table).set(found as object).where(held(lease)).returning()
      if (!row) throw new LeaseLost()
      lease.row = row as Row
    },

    /** Hands the work in under the row's lock, and only by who still holds the lease; `handIn` gives what the row learns. */
    async commit(lease: Held, handIn: (tx: Transaction) => Promise<Partial<Row>>): Promise<void> {
      await db().transaction(async (tx) => {
        const [row] = await tx.select({ id: table.id }).from(table).where(held(lease)).for('update')
        if (!row) throw new LeaseLost()
        const made = await handIn(tx)
        await tx.update(table)
          .set({ state: 'ready', progress: 1, leaseOwner: null, leaseUntil: null, errorCode: null, errorMessage: null, readyAt: sql`now()`, ...made as object })
          .where(held(lease))
        await changed(tx, lease)
      })
    },

    /** Gives the row back untouched, for the next worker: this one is stopping. */
    async release(lease: Held): Promise<void> {
      await db().update(table).set({ state: 'waiting', progress: 0, leaseOwner: null, leaseUntil: null }).where(held(lease))
    },

    /** What can't be worked on fails at once; a crash is tried again after a pause that grows. */
    async fail(lease: Held, error: { code: string, message: string }, isCrash: boolean): Promise<void> {
      const failures = lease.row.failures + 1
      const goesOn = isCrash && failures < maxFailures
      await db().transaction(async (tx) => {
        await tx.update(table).set(goesOn
          ? { state: 'waiting', progress: 0, failures, leaseOwner: null, leaseUntil: until(failures * lease.leaseSeconds / 10) }
          : { state: 'failed', failures, leaseOwner: null, leaseUntil: null, errorCode: error.code, errorMessage: error.message },
        ).where(held(lease))
        await changed(tx, lease)
      })
    },
  }
}
export type Leases<T extends WorkTable> = ReturnType<typeof leasesOf<T>>
