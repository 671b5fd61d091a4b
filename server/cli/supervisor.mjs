import { spawn } from 'node:child_process'
import { closeSync, existsSync, mkdirSync, openSync, readFileSync, renameSync, statSync } from 'node:fs'
import { dirname } from 'node:path'
import { birthOf, endProcesses } from './processes.mjs'
import { say } from './run.mjs'

const rotateAboveBytes = 20_000_000
const restartsAMinute = 3

/**
 * Keeps one process running: started again when it ends by itself, up to three times a minute; then `onGivenUp`.
 * Each leads a process group of its own, so that Ctrl-C reaches only the start command, which stops all in order.
 */
export function keepRunning({ name, program, args, env, cwd, logFile, lock, onGivenUp }) {
  let child
  let stopping = false
  let restarts = []

  const start = () => {
    const log = logFile ? openLog(logFile) : 'inherit'
    child = spawn(program, args, { cwd, env, detached: true, stdio: ['ignore', log, log] })
    if (logFile) closeSync(log)
    child.once('error', () => ended(null))
    child.once('exit', ended)
    if (child.pid) {
      child.birth = birthOf(child.pid)
      lock.record(child.pid)
    }
  }
  const ended = (code) => {
    if (stopping) return
    restarts = [...restarts.filter(at => at > Date.now() - 60_000), Date.now()]
    if (restarts.length > restartsAMinute) return onGivenUp(`${name} keeps ending (${code ?? 'killed'}).${logFile ? `\n${tail(logFile)}` : ''}`)
    say(`${name} ended (${code ?? 'killed'}) and is started again.`)
    setTimeout(() => stopping || start(), 500)
  }

  start()
  return {
    async stop(graceSeconds) {
      stopping = true
      await endProcesses([{ pid: child.pid, birth: child.birth }], graceSeconds)
    },
    async restart(graceSeconds) {
      await this.stop(graceSeconds)
      stopping = false
      start()
    },
  }
}

function openLog(path) {
  mkdirSync(dirname(path), { recursive: true })
  if (existsSync(path) && statSync(path).size > rotateAboveBytes) renameSync(path, `${path}.1`)
  return openSync(path, 'a', 0o600)
}

const tail = path => readFileSync(path, 'utf8').split('\n').slice(-15).join('\n')
