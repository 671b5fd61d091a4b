import { drizzle } from 'drizzle-orm/node-postgres'
import { migrate } from 'drizzle-orm/node-postgres/migrator'
import pg from 'pg'
import { installQueue } from '../jobs/queue'
import { knownMigrations, migrationsFolder } from './known-migrations'

// The migrate step, before web and worker start. `--check` only prints how many migrations wait, and how many there are.

const lockKey = 7_203_441

async function applied(client: pg.Client): Promise<string[]> {
  const { rows: [table] } = await client.query(`select to_regclass('drizzle.__drizzle_migrations') as name`)
  if (!table.name) return []
  const { rows } = await client.query(`select hash from drizzle.__drizzle_migrations order by id`)
  return rows.map(row => row.hash)
}

/** Forward only: what the database has must be the beginning of what this version knows. */
async function pending(client: pg.Client): Promise<{ pending: string[], applied: number }> {
  const known = knownMigrations()
  const done = await applied(client)
  if (done.length > known.length) throw new Error(`The database has ${done.length} migrations, this version knows ${known.length}: it was made by a newer version. Start that version, or restore the dump made before it.`)
  const strange = done.findIndex((hash, i) => hash !== known[i]!.hash)
  if (strange >= 0) throw new Error(`Migration ${strange + 1} of the database is not this version's ${known[strange]!.tag}. Nothing was changed.`)
  return { pending: known.slice(done.length).map(m => m.tag), applied: done.length }
}

async function migrateAll(client: pg.Client, url: string): Promise<void> {
  await client.query('select pg_advisory_lock($1)', [lockKey])
  await pending(client)
  await migrate(drizzle(client), { migrationsFolder })
  await installQueue(url)
}

async function main(): Promise<void> {
  const url = process.env.DATABASE_URL
  if (!url) throw new Error('DATABASE_URL: a postgres:// address')
  const client = new pg.Client({ connectionString: url })
  await client.connect()
  try {
    if (process.argv.includes('--check')) process.stdout.write(`${JSON.stringify(await pending(client))}\n`)
    else await migrateAll(client, url)
  }
  finally {
    await client.end()
  }
}

main().catch((error) => {
  process.stderr.write(`${error.message}\n`)
  process.exitCode = 1
})
