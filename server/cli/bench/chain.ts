import { setTimeout as sleep } from 'node:timers/promises'
import { seededRandom } from '#shared/calibration/random'
import { lightnessFromLuminance, luminanceFromLightness } from '#shared/tone/lightness'
import { linearToSrgb, srgbToLinear } from '#shared/tone/srgb'
import { filmLevels, rampLevels, rampPhoto, rampPx, rasterOf, typicalPrint } from '../../../tests/support/chain'
import { flatbed } from '../../../tests/support/scan-simulator/cameras'
import { simulatePrint, type SimulatedPrint } from '../../../tests/support/scan-simulator/print'
import { takePicture, type Optics } from '../../../tests/support/scan-simulator/take-picture'
import { drawSystem, type PrintedBench } from '../../../tests/support/simulator/system'
import { scanFile, scanForm } from '../../../tests/support/wedge-scans'
import { signedIn, type Client } from './client'
import { measured, type Measure, type SuiteContext } from './suite'

/** Simulated benches; BENCH_CHAIN_SYSTEMS makes a quicker or a longer run. */
const systems = Number(process.env.BENCH_CHAIN_SYSTEMS ?? 12)
/** Greatest |ΔL*| of a ramp: median, 95th percentile. */
const goals = [0.6, 1.2] as const
const wedgePage = { widthMm: 210, heightMm: 148 }
const wedgePixelsPerInch = 360
/** Ten pixels a millimetre, so that the ramp's film has the photo's own pixels. */
const rampPixelsPerInch = 254
const scanPixelsPerInch = 300

/** A consumer scanner lifts its shadows and presses its lights, and strays light. */
const consumerTone = (coded: number): number => coded + 0.025 * Math.sin(Math.PI * coded) + 0.012 * Math.sin(2 * Math.PI * coded)
const scanners: Record<'ideal' | 'consumer', Optics> = {
  ideal: { blurPx: 0.4, noiseCodes: 0.3 },
  consumer: { blurPx: 0.8, noiseCodes: 1.2, toneCurve: consumerTone, glareShare: 0.02, glareRadiusPx: 80, soilCount: 10 },
}
const kinds = ['ideal scanner', 'consumer scanner', 'consumer scanner with its profile'] as const
type Kind = typeof kinds[number]

/**
 * The whole chain over HTTP: a wedge's film file, its simulated print and scan, the reading, the curve, the negative of a ramp,
 * and what that prints as on an even print of the same bench. Benches and prints are seeded; the wedges' layouts are the
 * service's own, new in each run.
 */
export async function* run({ startService }: SuiteContext): AsyncIterable<Measure> {
  const service = await startService({ RATE_LIMITS: 'false' })
  try {
    const client = await signedIn(service.address)
    const scanner = await newScanner(client)
    const errors = new Map<Kind, number[]>(kinds.map(kind => [kind, []]))
    for (let seed = 1; seed <= systems; seed++)
      for (const [kind, error] of await errorsOf(client, scanner, seed)) errors.get(kind)!.push(error)
    for (const [kind, list] of errors) yield* figures(kind, list)
  }
  finally {
    await service.stop()
  }
}

function* figures(kind: Kind, list: number[]): Iterable<Measure> {
  // Without its profile a scanner's own error is what is seen; it has no goal.
  const [median, p95] = kind === 'consumer scanner' ? [null, null] : goals
  const sorted = [...list].sort((a, b) => a - b)
  const at = (share: number): number => sorted[Math.min(sorted.length - 1, Math.floor(share * sorted.length))]!
  const names = [`${kind}: greatest error of a ramp, median of ${systems} benches`, `${kind}: 95th percentile`] as const
  yield measured(names[0], at(0.5), 'L*', median)
  yield measured(names[1], at(0.95), 'L*', p95)
}

/** The id of a scanner on the shelf, with a profile from a grey scale of known densities 0.05 … 1.65 that it scanned. */
async function newScanner(client: Client): Promise<string> {
  const { id } = await client.json('POST', `${client.root}/scanners`, { name: 'Consumer flatbed' })
  const points = Array.from({ length: 17 }, (_, i) => lightnessFromLuminance(10 ** -(0.05 + i / 10)))
    .map(lightness => ({ measured: lightness, scanned: lightnessFromLuminance(srgbToLinear(consumerTone(linearToSrgb(luminanceFromLightness(lightness))))) }))
  await client.json('POST', `${client.root}/scanner-profiles/${id}`, { process: 'cyanotype', kind: 'grey-scale', points })
  return id
}

async function errorsOf(client: Client, scannerId: string, seed: number): Promise<[Kind, number][]> {
  const random = seededRandom(5000 + seed)
  const bench = drawSystem(random)
  const { id: benchId } = await client.json('POST', `${client.root}/benches`, { name: `Bench ${seed}`, process: 'cyanotype' })
  const wedge = await client.json('POST', `${client.root}/benches/${benchId}/wedges`, { page: wedgePage, pixelsPerInch: wedgePixelsPerInch })
  const film = await filmLevels(await fileOf(client, `${client.root}/wedges/${wedge.id}/file?format=png`))
  const print = simulatePrint(rasterOf(film, wedgePixelsPerInch), typicalPrint(bench, seed))
  const photo = await upload(client, await rampPhoto(random))
  const errors: [Kind, number][] = []
  const note = async (kind: Kind, file: Buffer, fields: Record<string, string>): Promise<void> => {
    const { id: readingId, scannerProfileId } = await read(client, wedge.id, file, fields)
    if (fields.scannerId && !scannerProfileId) throw new Error('The scan was not corrected by its scanner’s profile.')
    errors.push([kind, await rampError(client, bench, { benchId, readingId, photoId: photo })])
  }
  await note('ideal scanner', await scanOf(print, film, 'ideal', seed), {})
  const consumer = await scanOf(print, film, 'consumer', seed)
  await note('consumer scanner', consumer, {})
  await note('consumer scanner with its profile', await scanOf(print, film, 'consumer', seed + 1000), { scannerId })
  return errors
}

async function scanOf(print: SimulatedPrint, film: { width: number, height: number }, scanner: keyof typeof scanners, seed: number): Promise<Buffer> {
  const perMm = wedgePixelsPerInch / 25.4
  const camera = flatbed({ widthMm: film.width / perMm, heightMm: film.height / perMm }, { pixelsPerInch: scanPixelsPerInch, skewDegrees: 1.5, warpMm: 0.3, seed })
  return await scanFile(takePicture(print, camera, { seed, ...scanners[scanner] }), 'png')
}

/** Hands a scan in and waits until it is read. */
async function read(client: Client, wedgeId: string, file: Buffer, fields: Record<string, string>): Promise<{ id: string, scannerProfileId?: unknown }> {
  let reading = await client.json('POST', `${client.root}/wedges/${wedgeId}/readings`, scanForm(file, { quality: 'scan', ...fields }, 'wedge.png'))
  while (reading.state === 'waiting' || reading.state === 'making') {
    await sleep(100)
    reading = await client.json('GET', `${client.root}/readings/${reading.id}`)
  }
  if (reading.state !== 'ready') throw new Error(`The scan was not read: ${JSON.stringify(reading.error)}`)
  return reading
}

async function upload(client: Client, file: Buffer): Promise<string> {
  const form = new FormData()
  form.append('file', new Blob([new Uint8Array(file)]), 'ramp.png')
  const { items } = await client.json('POST', `${client.root}/photos`, form) as unknown as { items: { id: string }[] }
  return items[0]!.id
}

/** Greatest |ΔL*| of the ramp's even print against even lightness between the bench's own ends. */
async function rampError(client: Client, bench: PrintedBench, { benchId, readingId, photoId }: { benchId: string, readingId: string, photoId: string }): Promise<number> {
  const { id: curveId } = await client.json('POST', `${client.root}/benches/${benchId}/curves`, { readingIds: [readingId], aim: 'even-lightness' })
  await client.json('POST', `${client.root}/curves/${curveId}/use`)
  const size = { widthMm: rampPx.width / 10, heightMm: rampPx.height / 10 }
  const { id } = await client.json('POST', `${client.root}/negatives`, { photoId, benchId, size, pixelsPerInch: rampPixelsPerInch })
  const levels = rampLevels(await filmLevels(await fileOf(client, `${client.root}/negatives/${id}/file?format=tiff`)))
  const [black, white] = [bench.lightness(0), bench.lightness(1)]
  return levels.reduce((most, level, i) => Math.max(most, Math.abs(bench.lightness(level) - black - (white - black) * i / (levels.length - 1))), 0)
}

/** A film file, once it is made. */
async function fileOf(client: Client, path: string): Promise<Uint8Array> {
  for (;;) {
    const answer = await client.send('GET', path)
    if (answer.status === 200) return new Uint8Array(await answer.arrayBuffer())
    const text = await answer.text()
    if (answer.status !== 202) throw new Error(`${path} answered ${answer.status}: ${text}`)
    await sleep(100)
  }
}
