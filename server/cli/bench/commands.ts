import { spawn } from 'node:child_process'
import { readFileSync } from 'node:fs'

export interface Spent { seconds: number, peakBytes: number }

/** Highest memory that a process has held so far, from Linux' own count; 0 where there is none. */
export function peakBytesOf(processId: number | undefined): number {
  try {
    return 1024 * Number(/VmHWM:\s+(\d+)/.exec(readFileSync(`/proc/${processId}/status`, 'utf8'))?.[1] ?? 0)
  }
  catch {
    return 0
  }
}

/** Processor time that a process has used so far, from Linux' own count (proc(5), utime and stime in hundredths); 0 where there is none. */
export function processorSecondsOf(processId: number | undefined): number {
  try {
    const afterName = readFileSync(`/proc/${processId}/stat`, 'utf8').split(') ').at(-1)!.split(' ')
    return (Number(afterName[11]) + Number(afterName[12])) / 100
  }
  catch {
    return 0
  }
}

const lookEveryMs = 5

/** Runs one program to its end. Throws with what it said when it fails or is missing. */
export function runCommand(command: string[], env: Record<string, string> = {}): Promise<Spent> {
  return new Promise((resolve, reject) => {
    const [program, ...rest] = command as [string, ...string[]]
    const started = performance.now()
    const child = spawn(program, rest, { stdio: ['ignore', 'ignore', 'pipe'], env: { ...process.env, ...env } })
    let said = '', peakBytes = 0
    const watch = setInterval(() => { peakBytes = Math.max(peakBytes, peakBytesOf(child.pid)) }, lookEveryMs)
    child.stderr.on('data', (piece) => { said += piece })
    child.once('error', (error) => {
      clearInterval(watch)
      reject(error)
    })
    child.once('close', (code) => {
      clearInterval(watch)
      if (code === 0) resolve({ seconds: (performance.now() - started) / 1000, peakBytes })
      else reject(new Error(`${program} failed: ${said.trim().split('\n')[0]}`))
    })
  })
}

/** Programs one after the other: times add up, the largest counts for memory. */
export async function runChain(commands: string[][], env: Record<string, string>): Promise<Spent> {
  const total = { seconds: 0, peakBytes: 0 }
  for (const command of commands) {
    const { seconds, peakBytes } = await runCommand(command, env)
    total.seconds += seconds
    total.peakBytes = Math.max(total.peakBytes, peakBytes)
  }
  return total
}

export function median(values: number[]): number {
  const sorted = [...values].sort((a, b) => a - b)
  const middle = sorted.length >> 1
  return sorted.length % 2 === 1 ? sorted[middle]! : (sorted[middle - 1]! + sorted[middle]!) / 2
}
