import { mkdirSync } from 'node:fs'
import { join } from 'node:path'
import { inData } from './paths.mjs'
import { openCluster } from './postgres.mjs'
import { findPrograms } from './postgres-programs.mjs'
import { capture, run, say, Stop } from './run.mjs'

/** The database of this installation: the server that `DATABASE_URL` names, or the cluster of its own. */
export async function openDatabaseServer() {
  if (process.env.DATABASE_URL) return { url: process.env.DATABASE_URL, programs: findPrograms(), external: true, stop() {} }
  return { external: false, ...await openCluster({ folder: inData('postgres'), keep: inData('postgres.json') }) }
}

/** Brings the schema up to date; a database that holds something is dumped first. */
export function migrateDatabase({ url, programs }, programFolder) {
  const program = join(programFolder, 'migrate.mjs')
  const env = { ...process.env, DATABASE_URL: url }
  const checked = capture(process.execPath, [program, '--check'], { env })
  if (!checked.ok) throw new Stop(checked.problem)
  const { pending, applied } = JSON.parse(checked.text)
  if (pending.length === 0) return
  if (applied > 0) dumpBefore(pending[0], url, programs)
  say(`Bringing the database up to date (${pending.length} migration${pending.length > 1 ? 's' : ''}) …`)
  run(process.execPath, [program], { env })
}

function dumpBefore(tag, url, programs) {
  const path = inData('dumps', `before-${tag}-${new Date().toISOString().replaceAll(':', '')}.dump`)
  mkdirSync(inData('dumps'), { recursive: true, mode: 0o700 })
  say(`Dumping the database to ${path} …`)
  if (!programs) throw new Stop('Before a migration the database is dumped, and pg_dump is missing here. Install PostgreSQL\'s client programs.')
  dumpDatabase(programs, url, path)
}

/** Writes a custom-format dump; the password goes through the environment, never through the command line. */
export function dumpDatabase(programs, url, path) {
  const address = new URL(url)
  const env = { ...process.env, PGPASSWORD: decodeURIComponent(address.password) }
  address.password = ''
  run(join(programs, 'pg_dump'), ['--format=custom', '--no-owner', '--file', path, address.href], { env })
}
