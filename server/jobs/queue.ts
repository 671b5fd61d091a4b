import { sql } from 'drizzle-orm'
import PgBoss from 'pg-boss'
import type { Transaction } from '../db/client'
import { jobNames, type JobName, type JobPayloads } from './names'

/** For the migrate step: makes or upgrades pg-boss's own tables and a queue for every job name. */
export async function installQueue(databaseUrl: string): Promise<void> {
  const boss = new PgBoss({ connectionString: databaseUrl, max: 2, supervise: false, schedule: false })
  await boss.start()
  try {
    for (const name of jobNames) await boss.createQueue(name)
  }
  finally {
    await boss.stop({ graceful: false })
  }
}

/** Sends only: never started, it has no connection of its own and no timers. */
const sender = new PgBoss({ db: { executeSql: () => Promise.reject(new Error('Jobs are sent within a transaction.')) }, supervise: false, schedule: false, migrate: false })

/** Enqueues a job in the caller's transaction: it exists exactly when the rows that it is about do. */
export async function sendJob<N extends JobName>(tx: Transaction, name: N, payload: JobPayloads[N]): Promise<void> {
  const id = await sender.send(name, payload, { db: { executeSql: (text, values) => tx.execute(withValues(text, values)) } })
  if (!id) throw new Error(`The job ${name} has no queue: run the migrate step.`)
}

/** pg-boss writes `$1, $2 …`; Drizzle takes its values in place. */
function withValues(text: string, values: unknown[]) {
  return sql.join(text.split(/\$(\d+)/).map((part, i) => i % 2 === 1 ? sql.param(values[Number(part) - 1] ?? null) : sql.raw(part)))
}
