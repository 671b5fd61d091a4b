import { createHash, randomFillSync } from 'node:crypto'
import { existsSync, readdirSync, readFileSync } from 'node:fs'
import { setTimeout as sleep } from 'node:timers/promises'
import { seededRandom } from '../../../shared/calibration/random'
import { beginUpload, offsetOf, sendFrom } from '../../../tests/support/resumable'
import { type Client, clientAt, signedIn } from './client'
import { pngOf } from './png'
import { type Measure, measured, type RunningService, type SuiteContext } from './suite'

const cuts = 100
const sendsAtOnce = 50
const mostMegabytesMore = 150
const quiet = { RATE_LIMITS: 'false', FREE_DISK_MIN_BYTES: '0' }

/** Uploads that are cut, killed, doubled: what arrives is the file, once, or is not seen. */
export async function* run({ startService }: SuiteContext): AsyncIterable<Measure> {
  yield* largePhoto(startService)
  const service = await startService(quiet)
  try {
    yield* sameFile(await signedIn(service.address))
    yield* randomCuts(service, await signedIn(service.address))
  }
  finally {
    await service.stop()
  }
}

/** Noise can't be compressed, so that the file is as large as its pixels. */
const noise = (side: number): Buffer => pngOf({ width: side, height: side, channels: 3, codes: randomFillSync(Buffer.alloc(3 * side * side)) }, 0)
const sha256 = (bytes: Uint8Array): string => createHash('sha256').update(bytes).digest('hex')
const photosOf = async (client: Client) => (await client.json('GET', `${client.root}/photos`)).items as { id: string, sha256: string }[]

/** Cut at half, web and worker killed, gone on with at new ones. */
async function* largePhoto(startService: SuiteContext['startService']): AsyncIterable<Measure> {
  const picture = noise(8200)
  yield measured('photo', picture.length / 1e6, 'MB')
  const first = await startService(quiet)
  const client = await signedIn(first.address)
  await client.json('GET', `${client.root}/photos`)
  const path = await beginUpload(client, client.root, picture)
  const firstHalf = watchMemory(first.webPid)
  await sendFrom(client, path, 0, picture, picture.length >> 1).catch(() => {})
  yield measured('web’s memory above before, first half', firstHalf.stop(), 'MB', mostMegabytesMore)
  for (const pid of [first.webPid, first.workerPid]) process.kill(-pid, 'SIGKILL')

  const second = await startService(quiet)
  try {
    const back = { ...clientAt(second.address, client.cookieHeader()), root: client.root }
    await photosOf(back)
    const offset = await offsetOf(back, path)
    yield measured('arrived before the kill', 100 * offset / picture.length, '%')
    const secondHalf = watchMemory(second.webPid)
    const started = performance.now()
    const sent = await sendFrom(back, path, offset, picture)
    yield measured('second half sent, looked at and taken in', (performance.now() - started) / 1000, 's')
    yield measured('web’s memory above before, second half', secondHalf.stop(), 'MB', mostMegabytesMore)
    const photos = await photosOf(back)
    const file = photos[0] && await back.send('GET', `${back.root}/photos/${photos[0].id}/file`)
    const isEqual = sent.status === 204 && photos.length === 1 && sha256(new Uint8Array(await file!.arrayBuffer())) === sha256(picture)
    yield measured('photos whose SHA-256 differs from what was sent', isEqual ? 0 : 1, 'photos', 0)
  }
  finally {
    await second.stop()
  }
}

/** Resident memory of a process (proc(5), VmRSS), its greatest above where it stood, in MB. */
function watchMemory(pid: number) {
  const resident = () => Number(/VmRSS:\s+(\d+) kB/.exec(readFileSync(`/proc/${pid}/status`, 'utf8'))![1]) / 1000
  const before = resident()
  let most = before
  const sampling = setInterval(() => most = Math.max(most, resident()), 20)
  return {
    stop() {
      clearInterval(sampling)
      return Math.max(most, resident()) - before
    },
  }
}

async function* sameFile(client: Client): AsyncIterable<Measure> {
  const picture = noise(1200)
  const started = performance.now()
  const ended = await Promise.all(Array.from({ length: sendsAtOnce }, async () => {
    const path = await beginUpload(client, client.root, picture)
    const sent = await sendFrom(client, path, 0, picture)
    return sent.status === 204 && (await client.send('POST', `${path}/finish`)).ok
  }))
  yield measured(`${sendsAtOnce} sends of one file at once`, (performance.now() - started) / 1000, 's')
  yield measured('of them refused', ended.filter(isWhole => !isWhole).length, 'sends', 0)
  yield measured('photos of them beyond the one', Math.abs((await photosOf(client)).length - 1), 'photos', 0)
}

async function* randomCuts({ storage }: RunningService, client: Client): AsyncIterable<Measure> {
  const random = seededRandom(4)
  const picture = noise(2900)
  const studioId = client.root.split('/').at(-1)!
  const path = await beginUpload(client, client.root, picture)
  const id = path.split('/').at(-1)!
  let [seen, outside, lost, before] = [0, 0, 0, 0]
  for (let cut = 0; cut < cuts; cut++) {
    const offset = await offsetOf(client, path)
    if (offset < before) lost++
    before = offset
    await sendFrom(client, path, offset, picture, 1 + random.below(Math.ceil((picture.length - offset) / 20))).catch(() => {})
    await sleep(random.below(10))
    const answers = [await client.send('GET', `${client.root}/photos/${id}`), await client.send('GET', `${client.root}/photos/${id}/file`), await client.send('GET', `${client.root}/photos/${id}/thumbnail`)]
    if ((await photosOf(client)).length > 0 || answers.some(answer => answer.status !== 404)) seen++
    if (filesBelow(storage).some(file => file.includes(studioId) && !file.startsWith('temporary/parts/'))) outside++
  }
  const sent = await sendFrom(client, path, await offsetOf(client, path), picture)
  const [photo] = await photosOf(client)
  yield measured(`partial files seen by a route, of ${cuts} random cuts`, seen, 'cuts', 0)
  yield measured('partial files outside the temporary area', outside, 'cuts', 0)
  yield measured('cuts after which bytes were gone that had been there', lost, 'cuts', 0)
  yield measured('photos whose SHA-256 differs after all cuts', sent.status === 204 && photo?.sha256 === sha256(picture) ? 0 : 1, 'photos', 0)
}

const filesBelow = (folder: string): string[] => !existsSync(folder)
  ? []
  : readdirSync(folder, { recursive: true, withFileTypes: true }).filter(entry => entry.isFile()).map(entry => `${entry.parentPath}/${entry.name}`.slice(folder.length + 1))
