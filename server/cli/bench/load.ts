import { setTimeout as sleep } from 'node:timers/promises'
import { signedIn, type Client } from './client'
import { pngOf } from './png'
import { measured, type Measure, type SuiteContext } from './suite'

const requestsPerSecond = 50
const seconds = 30
const goalP99Ms = 150

/**
 * Light routes while films are being made: an open loop, so that a request that has to wait delays none after it, and its
 * wait counts from when it was due. One film is in the making and one waits all the time.
 */
export async function* run({ startService }: SuiteContext): AsyncIterable<Measure> {
  const service = await startService({ RATE_LIMITS: 'false' })
  try {
    const client = await signedIn(service.address)
    const { requests, films } = await prepare(client)
    const busy = keepBusy(client, films)
    await busy.started
    const { latencies, errors } = await openLoop(client, requests)
    const busyShare = await busy.stop()
    const at = (share: number) => latencies[Math.min(latencies.length - 1, Math.ceil(share * latencies.length) - 1)]!
    yield measured('light routes, p50', at(0.5), 'ms')
    yield measured('light routes, p95', at(0.95), 'ms')
    yield measured('light routes, p99', at(0.99), 'ms', goalP99Ms)
    yield measured('light routes, errors', errors, 'requests', 0)
    yield measured('light routes, sent', latencies.length, 'requests')
    yield measured('time with a film in the making and one waiting', 100 * busyShare, '%')
  }
  finally {
    await service.stop()
  }
}

/** A photo, a negative to look at, and large films to keep the worker busy. */
async function prepare(client: Client) {
  const form = new FormData()
  form.append('file', new Blob([new Uint8Array(gradientPng(2400, 1800))]), 'bench.png')
  const { items: [photo] } = await client.json('POST', `${client.root}/photos`, form) as unknown as { items: { id: string }[] }
  const negativeOf = (midtone: number, sideMm: number) => client.json('POST', `${client.root}/negatives`, { photoId: photo!.id, process: 'cyanotype', size: { widthMm: sideMm, heightMm: sideMm }, adjustments: { midtone } })
  const negative = await negativeOf(0, 100)
  const paths = [
    '/api/me', `${client.root}/photos`, `${client.root}/photos/${photo!.id}`, `${client.root}/photos/${photo!.id}/thumbnail`, `${client.root}/benches`,
    `${client.root}/negatives`, `${client.root}/negatives/${negative.id}`, `${client.root}/negatives/${negative.id}/print-card`,
  ]
  let made = 0
  return { requests: paths, films: async () => `${client.root}/negatives/${(await negativeOf(++made / 1000, 450)).id}/file?format=tiff` }
}

/** Asks for a new film whenever fewer than two are under way; says for which share of the time two were. */
function keepBusy(client: Client, nextFilm: () => Promise<string>) {
  let open: string[] = []
  let [looks, busyLooks] = [0, 0]
  let going = true
  const look = async () => {
    const states = await Promise.all(open.map(async path => (await client.send('HEAD', path)).status))
    open = open.filter((_, i) => states[i] === 202)
    looks++
    if (open.length >= 2) busyLooks++
    while (open.length < 3) {
      const path = await nextFilm()
      await client.send('HEAD', path)
      open.push(path)
    }
  }
  const started = look()
  const loop = started.then(async () => {
    [looks, busyLooks] = [0, 0]
    while (going) {
      await look()
      await sleep(250)
    }
  })
  return {
    started,
    async stop() {
      going = false
      await loop
      return busyLooks / looks
    },
  }
}

async function openLoop(client: Client, paths: string[]): Promise<{ latencies: number[], errors: number }> {
  const total = requestsPerSecond * seconds
  const latencies: number[] = []
  let errors = 0
  const begin = performance.now()
  const pending: Promise<void>[] = []
  for (let i = 0; i < total; i++) {
    const due = begin + 1000 * i / requestsPerSecond
    const early = due - performance.now()
    if (early > 0) await sleep(early)
    pending.push(client.send('GET', paths[i % paths.length]!)
      .then(async (response) => {
        await response.arrayBuffer()
        if (!response.ok) errors++
      }, () => void errors++)
      .finally(() => latencies.push(performance.now() - due)))
  }
  await Promise.all(pending)
  return { latencies: latencies.sort((a, b) => a - b), errors }
}

/** Smooth tones. */
function gradientPng(width: number, height: number): Buffer {
  const codes = Uint8Array.from({ length: width * height }, (_, i) => 255 * (i % width + Math.floor(i / width)) / (width + height))
  return pngOf({ width, height, channels: 1, codes })
}
