import { type ChildProcess, spawn } from 'node:child_process'
import { closeSync, mkdirSync, openSync, readFileSync } from 'node:fs'
import { join } from 'node:path'
import { setTimeout as sleep } from 'node:timers/promises'
import { webProgram } from '../../server/cli/paths.mjs'
import { freePort } from '../../server/cli/postgres.mjs'

export interface Application { address: string, databaseUrl: string, storage: string }
interface Settings { programs: string, databaseUrl: string, storage: string, env?: Record<string, string> }

/** The settings that tests run with: short leases, answers checked against the contract, no rate limits. */
function testEnvironment({ programs, databaseUrl, storage, env = {} }: Settings) {
  return {
    ...process.env, NODE_ENV: 'production', DATABASE_URL: databaseUrl, STORAGE_DIR: storage,
    NUXT_SESSION_PASSWORD: 'only-for-tests-only-for-tests-only', IMAGE_CHILD_PROGRAM: join(programs, 'image-child.mjs'),
    LEASE_SECONDS: '1', LEASE_RENEW_SECONDS: '0.3', POLL_SECONDS: '0.2', CHECK_ANSWERS: 'true', RATE_LIMITS: 'false',
    FREE_DISK_MIN_BYTES: '0', LOG_LEVEL: 'warn', ...env,
  }
}

function start(name: string, program: string, storage: string, env: NodeJS.ProcessEnv) {
  mkdirSync(storage, { recursive: true })
  const path = join(storage, `${name}.log`)
  const log = openSync(path, 'a')
  const child = spawn(process.execPath, ['--enable-source-maps', program], { env, stdio: ['ignore', log, log], detached: true })
  closeSync(log)
  return { child, log: () => readFileSync(path, 'utf8') }
}

/** A worker process on a database; tests of kills start and kill their own. */
export function startWorker(settings: Settings) {
  const { child, log } = start('worker', join(settings.programs, 'worker.mjs'), settings.storage, testEnvironment(settings))
  return { child, log, stop: () => stop(child), kill: () => killGroup(child) }
}

/** Web on a free port, answering when this resolves. */
export async function startWeb(settings: Settings) {
  const port = await freePort()
  const address = `http://127.0.0.1:${port}`
  const { child, log } = start('web', webProgram, settings.storage, { ...testEnvironment(settings), HOST: '127.0.0.1', PORT: String(port), NUXT_PUBLIC_URL: address })
  const deadline = Date.now() + 30_000
  while (!(await fetch(`${address}/api/health/ready`).catch(() => undefined))?.ok) {
    if (child.exitCode !== null || Date.now() > deadline) {
      killGroup(child)
      throw new Error(`The application did not get ready:\n${log()}`)
    }
    await sleep(50)
  }
  return { ...settings, address, child, log, stop: () => stop(child), kill: () => killGroup(child) }
}

/** Web and a worker. */
export async function startApplication(settings: Settings) {
  const web = await startWeb(settings)
  const worker = startWorker(settings)
  const children = [web.child, worker.child]
  return { ...settings, address: web.address, children, stop: () => Promise.all([web.stop(), worker.stop()]) }
}

/** Asks a process to end and waits until it has; one that doesn't within 20 s is killed and makes the test fail. */
async function stop(child: ChildProcess): Promise<void> {
  if (child.exitCode !== null || child.signalCode !== null) return
  const ended = new Promise<void>(resolve => child.once('exit', () => resolve()))
  child.kill('SIGTERM')
  const late = setTimeout(() => killGroup(child), 20_000)
  await ended
  clearTimeout(late)
  if (child.signalCode === 'SIGKILL') throw new Error('A process of the application did not stop within 20 s.')
}

function killGroup(child: ChildProcess): void {
  try {
    process.kill(-child.pid!, 'SIGKILL')
  }
  catch (error) {
    if ((error as NodeJS.ErrnoException).code !== 'ESRCH') throw error
  }
}
