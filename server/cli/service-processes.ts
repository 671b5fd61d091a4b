import { type ChildProcess, spawn } from 'node:child_process'
import { closeSync, mkdirSync, openSync, readFileSync } from 'node:fs'
import { createServer } from 'node:net'
import { dirname, join } from 'node:path'
import { setTimeout as sleep } from 'node:timers/promises'

// Web and worker as processes of a bench or a test, each with a log file; not for the installation itself.

export interface ServicePrograms { web: string, worker: string }
export interface ServiceProcess { child: ChildProcess, log: () => string, stop: () => Promise<void>, kill: () => void }

const portOf = (server: ReturnType<typeof createServer>) => (server.address() as { port: number }).port

export const freePort = () => new Promise<number>((resolve, reject) => {
  const probe = createServer().once('error', reject)
  probe.listen(0, '127.0.0.1', () => {
    const port = portOf(probe)
    probe.close(() => resolve(port))
  })
})

function start(program: string, env: NodeJS.ProcessEnv, logPath: string): ServiceProcess {
  mkdirSync(dirname(logPath), { recursive: true })
  const log = openSync(logPath, 'a')
  const child = spawn(process.execPath, ['--enable-source-maps', program], { env, stdio: ['ignore', log, log], detached: true })
  closeSync(log)
  return { child, log: () => readFileSync(logPath, 'utf8'), stop: () => stop(child), kill: () => killGroup(child) }
}

export const startWorker = (programs: ServicePrograms, env: NodeJS.ProcessEnv, logFolder: string) => start(programs.worker, env, join(logFolder, 'worker.log'))

/** Web on a free port of loopback, answering when this resolves. */
export async function startWeb(programs: ServicePrograms, env: NodeJS.ProcessEnv, logFolder: string): Promise<ServiceProcess & { address: string }> {
  const port = await freePort()
  const address = `http://127.0.0.1:${port}`
  const web = start(programs.web, { ...env, HOST: '127.0.0.1', PORT: String(port) }, join(logFolder, 'web.log'))
  const deadline = Date.now() + 60_000
  while (!(await fetch(`${address}/api/health/ready`).catch(() => undefined))?.ok) {
    if (web.child.exitCode !== null || Date.now() > deadline) {
      web.kill()
      throw new Error(`The service did not get ready:\n${web.log()}`)
    }
    await sleep(50)
  }
  return { ...web, address }
}

/** Asks a process to end and waits until it has; one that doesn't within 20 s is killed, which is an error. */
async function stop(child: ChildProcess): Promise<void> {
  if (child.exitCode !== null || child.signalCode !== null) return
  const ended = new Promise<void>(resolve => child.once('exit', () => resolve()))
  child.kill('SIGTERM')
  const late = setTimeout(() => killGroup(child), 20_000)
  await ended
  clearTimeout(late)
  if (child.signalCode === 'SIGKILL') throw new Error('A process of the service did not stop within 20 s.')
}

function killGroup(child: ChildProcess): void {
  try {
    process.kill(-child.pid!, 'SIGKILL')
  }
  catch (error) {
    if ((error as NodeJS.ErrnoException).code !== 'ESRCH') throw error
  }
}
