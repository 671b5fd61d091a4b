import { readdirSync, readFileSync } from 'node:fs'
import { join } from 'node:path'
import { Readable } from 'node:stream'
import { setTimeout as sleep } from 'node:timers/promises'
import pg from 'pg'
import { bombs, longTextPng } from '../../../tests/support/pictures/bombs'
import { mutantOf, soundPictures } from '../../../tests/support/pictures/mutants'
import { type Client, signedIn } from './client'
import { measured, type Measure, type RunningService, type Suite } from './suite'

/** Mutants sent; BENCH_SOAK_MUTANTS makes a shorter run, BENCH_SOAK_FIRST starts at another seed. */
const mutants = Number(process.env.BENCH_SOAK_MUTANTS ?? 10_000)
const firstSeed = Number(process.env.BENCH_SOAK_FIRST ?? 1)
const answeredWithinMs = 2000
const [memoryGoalMb, lightGoalMs] = [50, 200]
const longTextBytes = 400_000_000

/** Broken and hostile pictures through the real route: nothing may fall over, hang or stay behind. */
export const run: Suite = async function* ({ startService }) {
  const service = await startService({ RATE_LIMITS: 'false', FREE_DISK_MIN_BYTES: '0' })
  try {
    const pictures = await soundPictures()
    yield* mutated(service, pictures)
    yield* hostile(service, pictures['plain.heic']!)
  }
  finally {
    await service.stop()
  }
}

async function* mutated(service: RunningService, pictures: Record<string, Buffer>): AsyncIterable<Measure> {
  const client = await signedIn(service.address)
  const slowest = { ms: 0, what: '' }
  let [serverErrors, taken] = [0, 0]
  for (let seed = firstSeed; seed < firstSeed + mutants; seed++) {
    const { name, bytes } = mutantOf(pictures, seed)
    const started = performance.now()
    const { status, text } = await sent(client, name, bytes)
    const ms = performance.now() - started
    if (ms > slowest.ms) Object.assign(slowest, { ms, what: `seed ${seed}, ${name}` })
    if (ms > answeredWithinMs) process.stderr.write(`seed ${seed}, ${name}: ${Math.round(ms)} ms\n`)
    if (status >= 500 || status < 200) {
      serverErrors++
      process.stderr.write(`seed ${seed}, ${name}: ${status} ${text.slice(0, 300)}\n`)
    }
    if (status === 200 || status === 201) taken++
  }
  yield measured(`mutants answered by an error of the service, of ${mutants}`, serverErrors, 'answers', 0)
  yield { ...measured('slowest answer to a mutant', slowest.ms, 'ms', answeredWithinMs), reason: slowest.what }
  yield measured('mutants that were still pictures', taken, 'pictures')
  yield measured('processes that ended', [service.webPid, service.workerPid].filter(pid => !isAlive(pid)).length, 'processes', 0)
  yield measured('files and rows without each other', await orphans(service), 'files and rows', 0)
}

async function sent(client: Client, name: string, bytes: Buffer): Promise<{ status: number, text: string }> {
  const form = new FormData()
  form.append('file', new Blob([new Uint8Array(bytes)]), name)
  const answer = await client.send('POST', `${client.root}/photos`, form).catch((error: Error) => error)
  return answer instanceof Error ? { status: 0, text: String(answer.cause ?? answer) } : { status: answer.status, text: await answer.text() }
}

function isAlive(pid: number): boolean {
  try {
    process.kill(pid, 0)
    return true
  }
  catch {
    return false
  }
}

/** Originals without a row, rows without an original, and temporary files that no sweep would find young. */
async function orphans({ databaseUrl, storage }: RunningService): Promise<number> {
  const client = new pg.Client({ connectionString: databaseUrl })
  await client.connect()
  const { rows } = await client.query<{ key: string }>(`select studio_id || '/' || id as key from photos`)
  await client.end()
  const named = new Set(rows.map(row => row.key))
  const files = filesBelow(join(storage, 'originals'))
  return files.filter(file => !named.delete(file)).length + named.size + filesBelow(join(storage, 'temporary')).length
}

function filesBelow(folder: string): string[] {
  try {
    return readdirSync(folder, { recursive: true, withFileTypes: true }).filter(entry => entry.isFile()).map(entry => join(entry.parentPath, entry.name).slice(folder.length + 1))
  }
  catch {
    return []
  }
}

/** Bombs one after the other, while somebody else looks at photos and web's memory is watched. */
async function* hostile(service: RunningService, heic: Buffer): AsyncIterable<Measure> {
  const all = bombs(heic)
  const [attacker, other] = [await signedIn(service.address), await signedIn(service.address)]
  const before = memoryMb(service.webPid)
  let [going, peak] = [true, before]
  const waits: number[] = []
  const watching = (async () => {
    for (; going; await sleep(20)) peak = Math.max(peak, memoryMb(service.webPid))
  })()
  const asking = (async () => {
    while (going) {
      const started = performance.now()
      await (await other.send('GET', `${other.root}/photos`)).arrayBuffer()
      waits.push(performance.now() - started)
      await sleep(30)
    }
  })()
  let wrong = 0
  const slowest = { ms: 0, what: '' }
  const look = (name: string, { status, text }: { status: number, text: string }, code: string, started: number, mayTake = Infinity) => {
    const ms = performance.now() - started
    if (ms > slowest.ms && ms < mayTake) Object.assign(slowest, { ms, what: name })
    if (status < 500 && text.includes(`"${code}"`)) return
    wrong++
    process.stderr.write(`${name}: ${status} ${text.slice(0, 300)}\n`)
  }
  for (const { name, bytes, code } of all) {
    const started = performance.now()
    look(name, await sent(attacker, `${name}.jpg`, bytes), code, started)
  }
  const started = performance.now()
  look('PNG with 400 MB of text', await sendLongText(attacker), 'image_unreadable', started, 0)
  going = false
  await Promise.all([watching, asking])
  waits.sort((a, b) => a - b)
  yield measured('bombs not refused as they should be', wrong, 'bombs', 0)
  yield { ...measured('slowest answer to a bomb', slowest.ms, 'ms', answeredWithinMs), reason: slowest.what }
  yield measured('web’s memory above what it was, at its peak', peak - before, 'MB', memoryGoalMb)
  yield { ...measured('other requests meanwhile, p99', waits[Math.floor(0.99 * (waits.length - 1))]!, 'ms', lightGoalMs), reason: `${waits.length} requests` }
  yield measured('processes that ended', [service.webPid, service.workerPid].filter(pid => !isAlive(pid)).length, 'processes', 0)
}

/** Linux: resident memory of a process. */
const memoryMb = (pid: number): number => Number(/VmRSS:\s+(\d+)/.exec(readFileSync(`/proc/${pid}/status`, 'utf8'))![1]) / 1000

async function sendLongText(client: Client): Promise<{ status: number, text: string }> {
  const boundary = 'between-parts'
  const body = Readable.from((function* () {
    yield Buffer.from(`--${boundary}\r\ncontent-disposition: form-data; name="file"; filename="long.png"\r\n\r\n`)
    yield* longTextPng(longTextBytes)
    yield Buffer.from(`\r\n--${boundary}--\r\n`)
  })())
  const response = await client.stream('POST', `${client.root}/photos`, Readable.toWeb(body) as ReadableStream, `multipart/form-data; boundary=${boundary}`)
  return { status: response.status, text: await response.text() }
}
