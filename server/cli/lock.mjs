import { existsSync, mkdirSync, readFileSync, renameSync, rmSync, writeFileSync } from 'node:fs'
import { dirname } from 'node:path'
import { birthOf, endProcesses, isSame } from './processes.mjs'
import { say, Stop } from './run.mjs'

/**
 * One start command an installation: the lock file names it and the processes it started. When that command is gone
 * (kill -9), the processes recorded in the file are ended, and no others.
 */
export async function takeLock(path) {
  mkdirSync(dirname(path), { recursive: true, mode: 0o755 })
  const before = existsSync(path) ? readLock(path) : undefined
  if (before && isSame(before)) throw new Stop(`Emulside already runs from this folder (process ${before.pid}). Stop it first.`)
  if (before) rmSync(path)
  const lock = { pid: process.pid, birth: birthOf(process.pid), children: before?.children ?? [] }
  claim(path, lock)
  if (lock.children.some(isSame)) say('Ending processes that an earlier start left behind …')
  await endProcesses(lock.children, 3)
  lock.children = []
  const save = () => {
    writeFileSync(`${path}.new`, JSON.stringify(lock))
    renameSync(`${path}.new`, path)
  }
  save()
  return {
    record: (pid) => {
      lock.children = [...lock.children.filter(isSame), { pid, birth: birthOf(pid) }]
      save()
    },
    release: () => rmSync(path, { force: true }),
  }
}

function readLock(path) {
  try {
    return JSON.parse(readFileSync(path, 'utf8'))
  }
  catch {
    return undefined
  }
}

function claim(path, lock) {
  try {
    writeFileSync(path, JSON.stringify(lock), { flag: 'wx' })
  }
  catch {
    throw new Stop('Another start is under way in this folder.')
  }
}
