import { type ChildProcess, spawn } from 'node:child_process'
import { ComputeError, type ErrorCode, type Issue } from '#shared/errors'
import type { ImageCalls } from './protocol'

export interface ImageChildSettings {
  /** the bundled `child.ts` */
  programPath: string
  /** the most virtual memory that the child may map; enforced on Linux */
  addressSpaceBytes: number
  /** a job that takes longer is ended with its child */
  timeoutSeconds: number
  /** threads of libvips and of the file writer's compression */
  threads?: number
  /** how far the child steps back before other processes of the machine, 0 … 19 */
  niceness?: number
}

export interface CallOptions { onProgress?: (fraction: number) => void, signal?: AbortSignal }

export interface ImageChild {
  call<K extends keyof ImageCalls>(name: K, input: ImageCalls[K]['in'], options?: CallOptions): Promise<ImageCalls[K]['out']>
  /** the running program's process id, for tests and metrics */
  readonly processId: number | undefined
  close(): Promise<void>
}

/** What the child sends back for a job. */
export type ImageReply = { id: number } & (
  | { kind: 'progress', fraction: number }
  | { kind: 'done', result: unknown }
  | { kind: 'failed', code: ErrorCode, message: string, issues?: Issue[] }
)

interface Job {
  id: number
  name: keyof ImageCalls
  input: unknown
  options: CallOptions
  resolve: (result: never) => void
  reject: (reason: unknown) => void
}

/** Someone waits at a screen for these; a long film waits behind them. */
const interactive = new Set<keyof ImageCalls>(['probe', 'thumbnail', 'proxy', 'forecast', 'wedgePreview', 'fitCurve', 'scanPicture', 'findBaseExposure', 'splitFilm', 'curveThroughFilm', 'evenness', 'checkCurve', 'readInkTrial'])

const childFailed = (why: string) =>
  new ComputeError('image_child_failed', `The picture could not be worked on: ${why}. Try again; if it happens again, try a smaller picture or film.`)

/**
 * Runs picture work in one child process, one job at a time. The child is started with the first job; one that
 * dies, hangs or is aborted fails its own job only and the next job gets a fresh child.
 */
export function openImageChild(settings: ImageChildSettings): ImageChild {
  const queue: Job[] = []
  let child: ChildProcess | undefined
  let running: Job | undefined
  let timer: NodeJS.Timeout | undefined
  let lastId = 0
  let closed = false

  function settle(finish: (job: Job) => void) {
    const job = running
    if (!job) return
    running = undefined
    clearTimeout(timer)
    job.options.signal?.removeEventListener('abort', abortRunning)
    finish(job)
    startNext()
  }

  /** Ends the child together with its job; what it still says is no longer heard. */
  function discardChild(reason: unknown): Promise<void> {
    const discarded = child
    child = undefined
    const ended = new Promise<void>((resolve) => {
      if (!discarded || discarded.exitCode !== null || discarded.signalCode !== null) return resolve()
      discarded.removeAllListeners()
      discarded.on('error', () => resolve())
      discarded.once('exit', () => resolve())
      discarded.kill('SIGKILL')
    })
    settle(job => job.reject(reason))
    return ended
  }

  function abortRunning() {
    void discardChild(running?.options.signal?.reason)
  }

  function hear(reply: ImageReply) {
    if (reply.id !== running?.id) return
    if (reply.kind === 'progress') running.options.onProgress?.(reply.fraction)
    else if (reply.kind === 'done') settle(job => job.resolve(reply.result as never))
    else settle(job => job.reject(new ComputeError(reply.code, reply.message, reply.issues)))
  }

  function startChild(): ChildProcess {
    const started = spawnLimited(settings)
    started.on('message', reply => hear(reply as ImageReply))
    started.on('error', error => void discardChild(childFailed(error.message)))
    started.on('exit', (code, signal) => void discardChild(childFailed(signal ? `its process was ended by ${signal}` : `its process ended with code ${code}`)))
    return started
  }

  function startNext() {
    if (running || closed) return
    const urgent = queue.findIndex(job => interactive.has(job.name))
    const [job] = queue.splice(Math.max(urgent, 0), 1)
    if (!job) return child?.channel?.unref()
    running = job
    child ??= startChild()
    child.channel?.ref()
    job.options.signal?.addEventListener('abort', abortRunning)
    timer = setTimeout(() => void discardChild(childFailed(`it took longer than ${settings.timeoutSeconds} s`)), settings.timeoutSeconds * 1000)
    child.send({ id: job.id, name: job.name, input: job.input }, (error) => {
      if (error && running === job) void discardChild(childFailed(error.message))
    })
  }

  function enqueue(job: Job) {
    const { signal } = job.options
    if (closed) return job.reject(childFailed('the service is stopping'))
    if (signal?.aborted) return job.reject(signal.reason)
    signal?.addEventListener('abort', () => {
      const place = queue.indexOf(job)
      if (place >= 0) queue.splice(place, 1)[0]!.reject(signal.reason)
    }, { once: true })
    queue.push(job)
    startNext()
  }

  return {
    call: (name, input, options = {}) =>
      new Promise((resolve, reject) => enqueue({ id: ++lastId, name, input, options, resolve, reject })),
    get processId() { return child?.pid },
    async close() {
      closed = true
      for (const job of queue.splice(0)) job.reject(childFailed('the service is stopping'))
      await discardChild(childFailed('the service is stopping'))
    },
  }
}

/** On Linux the shell lowers its own address-space limit and priority and then becomes the program. */
function spawnLimited({ programPath, addressSpaceBytes, threads = 2, niceness = 0 }: ImageChildSettings): ChildProcess {
  const command = [process.execPath, '--disable-wasm-trap-handler', '--expose-gc', programPath]
  const [program, ...rest] = process.platform === 'linux'
    ? ['/bin/sh', '-c', `ulimit -v ${Math.floor(addressSpaceBytes / 1024)} && exec nice -n ${niceness} "$@"`, 'sh', ...command]
    : command
  return spawn(program!, rest, {
    stdio: ['ignore', 'inherit', 'inherit', 'ipc'],
    env: { PATH: process.env.PATH, TZ: 'UTC', UV_THREADPOOL_SIZE: String(threads), IMAGE_THREADS: String(threads) },
  })
}
