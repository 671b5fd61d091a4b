import { spawn, spawnSync } from 'node:child_process'

/** An end that a person can act on: printed without a stack. */
export class Stop extends Error {}

/** Runs a program to its end with our own output. Throws `Stop` when it fails. */
export function run(program, args, options = {}) {
  const ended = spawnSync(program, args, { stdio: 'inherit', ...options })
  if (ended.error) throw new Stop(`${program} did not start: ${ended.error.message}`)
  if (ended.status !== 0) throw new Stop(`${program} ${args[0] ?? ''} ended with ${ended.status ?? ended.signal}.`)
}

/** Runs a program and gives what it wrote; `ok` tells whether it ended well. */
export function capture(program, args, options = {}) {
  const ended = spawnSync(program, args, { encoding: 'utf8', ...options })
  return { ok: ended.status === 0, text: ended.stdout ?? '', problem: (ended.stderr ?? '') + (ended.error?.message ?? '') }
}

const aside = new Set()

/** Like `run`, without blocking this process. */
export function runAside(program, args, options = {}) {
  return new Promise((resolve, reject) => {
    const child = spawn(program, args, { stdio: 'inherit', ...options })
    aside.add(child)
    child.on('close', () => aside.delete(child))
    child.on('error', error => reject(new Stop(`${program} did not start: ${error.message}`)))
    child.on('exit', (code, signal) => code === 0 ? resolve() : reject(new Stop(`${program} ${args[0] ?? ''} ended with ${code ?? signal}.`)))
  })
}

/** Ends what still runs aside. */
export function endAside() {
  for (const child of aside) child.kill('SIGTERM')
}

export function say(line) {
  process.stdout.write(`${line}\n`)
}

/** Runs a command's main function; a `Stop` becomes its message and exit code 1. */
export async function main(work) {
  try {
    await work()
  }
  catch (error) {
    process.stderr.write(`\n${error instanceof Stop ? error.message : error.stack}\n`)
    process.exitCode = 1
  }
}
