import { spawn } from 'node:child_process'
import { mkdtempSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { setTimeout as sleep } from 'node:timers/promises'
import pg from 'pg'
import { inject, onTestFinished } from 'vitest'
import { builtPrograms } from '../../server/cli/paths.mjs'
import { findPrograms } from '../../server/cli/postgres-programs.mjs'

/** A program of the built service, run to its end. */
export function runProgram(name: string, args: string[], env: Record<string, string>): Promise<{ status: number | null, text: string }> {
  return new Promise((resolve, reject) => {
    const child = spawn(process.execPath, [join(builtPrograms, `${name}.mjs`), ...args], { env: { ...process.env, POSTGRES_BIN: findPrograms()!, ...env } })
    let text = ''
    for (const stream of [child.stdout, child.stderr]) stream.on('data', chunk => text += chunk)
    child.on('error', reject)
    child.on('close', status => resolve({ status, text }))
  })
}

/** A folder of this test's own. */
export const newFolder = () => mkdtempSync(join(tmpdir(), 'emulside-test-'))

let count = 0
/** A database of this test's own, empty or cloned from the migrated template; dropped afterwards. */
export async function newDatabase(kind: 'empty' | 'migrated'): Promise<string> {
  const name = `own_${process.pid}_${count++}`
  const admin = inject('superuserUrl')
  const once = async (text: string) => {
    const client = new pg.Client({ connectionString: admin })
    await client.connect()
    await client.query(text).finally(() => client.end())
  }
  // PostgreSQL copies a template for one at a time.
  const retried = async (text: string, tries = 20): Promise<void> => once(text).catch(async (error) => {
    if (tries === 0 || error.code !== '55006') throw error
    await sleep(100)
    await retried(text, tries - 1)
  })
  await retried(`create database ${name} owner emulside_test template ${kind === 'empty' ? 'template1' : 'emulside_template'}`)
  onTestFinished(() => once(`drop database if exists ${name} with (force)`))
  const url = new URL(inject('databaseUrl'))
  url.pathname = name
  return url.href
}

/** A client on a database, closed when the test has finished. */
export async function connect(url: string): Promise<pg.Client> {
  const client = new pg.Client({ connectionString: url })
  // The database may be dropped before the test's clients are closed.
  client.on('error', () => {})
  await client.connect()
  onTestFinished(() => client.end())
  return client
}
