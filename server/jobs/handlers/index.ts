import { jobNames, type JobName, type JobPayloads } from '../names'
import { makeRender } from './make-render'
import { readScan } from './read-scan'
import { sendLetter } from './send-letter'

/** What a handler may do: the rows hold the work, so a job wakes who works on them. */
export interface JobContext { wake: (work: 'films' | 'readings' | 'letters') => void }
export type JobHandler<N extends JobName> = (payload: JobPayloads[N], context: JobContext) => Promise<void> | void

export const jobHandlers: { [N in JobName]: JobHandler<N> } = {
  'make-render': makeRender,
  'read-scan': readScan,
  'send-letter': sendLetter,
}

/** Every job name has exactly one handler, and every handler a name; else the worker must not start. */
export function requireHandlers(handlers: Record<string, unknown> = jobHandlers, names: readonly string[] = jobNames): void {
  const without = names.filter(name => typeof handlers[name] !== 'function')
  const unknown = Object.keys(handlers).filter(name => !names.includes(name))
  const twice = names.filter((name, i) => names.indexOf(name) !== i)
  if (without.length) throw new Error(`No handler for the job ${without.join(', ')}.`)
  if (unknown.length) throw new Error(`A handler for ${unknown.join(', ')}, which is no job.`)
  if (twice.length) throw new Error(`The job ${twice.join(', ')} is named twice.`)
}
