import { readFileSync } from 'node:fs'
import { setTimeout as sleep } from 'node:timers/promises'
import { capture } from './run.mjs'

const onLinux = process.platform === 'linux'

/** When a process was born, in a form that tells it from a later one with the same number; undefined when there is none. */
export function birthOf(pid) {
  try {
    process.kill(pid, 0)
  }
  catch (error) {
    if (error.code !== 'EPERM') return
  }
  if (!onLinux) return capture('ps', ['-o', 'lstart=', '-p', String(pid)]).text.trim() || undefined
  try {
    const fields = readFileSync(`/proc/${pid}/stat`, 'utf8').split(') ').at(-1).split(' ')
    return fields[0] === 'Z' ? undefined : `${bootId()} ${fields[19]}`
  }
  catch {
    return undefined
  }
}

const bootId = () => readFileSync('/proc/sys/kernel/random/boot_id', 'utf8').trim()

export const isSame = ({ pid, birth }) => birth !== undefined && birthOf(pid) === birth

/** Signals a process and all that it started (each of ours leads a group of its own). */
export function signalGroup(pid, signal) {
  try {
    process.kill(-pid, signal)
  }
  catch (error) {
    if (error.code !== 'ESRCH') throw error
  }
}

/** Asks recorded processes to end, and after `graceSeconds` ends them. */
export async function endProcesses(records, graceSeconds) {
  const living = records.filter(isSame)
  for (const { pid } of living) signalGroup(pid, 'SIGTERM')
  const deadline = Date.now() + graceSeconds * 1000
  while (living.some(isSame) && Date.now() < deadline) await sleep(50)
  for (const { pid } of living) signalGroup(pid, 'SIGKILL')
}
