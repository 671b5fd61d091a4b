import { existsSync, rmSync, writeFileSync } from 'node:fs'
import { join } from 'node:path'
import { type ImageChild, openImageChild } from '../../image/pool'
import type { FilmOrder } from '../../image/protocol'
import { median, peakBytesOf, runChain, runCommand, type Spent } from './commands'
import { measured, notMeasured, type Measure, type SuiteContext } from './suite'

// A warm child of the service against whole commands that a printmaker with a shell would script; both with two threads,
// turn by turn in one run, so that a busy machine slows both; medians of five.

const rounds = 5
const threads = 2
/** A CC0 photograph of Debian's libjxl-testdata; scaled up and given a camera's noise, it has a large photograph's work in it. */
const photograph = '/usr/share/libjxl-testdata/jxl/flower/flower.png.im_q85_444.jpg'

interface Task { label: string, sourceWidth: number, sourceHeight: number, side: number }
const tasks = {
  phone: { label: '12 MP JPEG to 3600 × 3600', sourceWidth: 4000, sourceHeight: 3000, side: 3600 },
  large: { label: '48 MP JPEG to 9921 × 9921', sourceWidth: 8000, sourceHeight: 6000, side: 9921 },
} satisfies Record<string, Task>

async function makeSource(task: Task, folder: string): Promise<string> {
  const at = (name: string) => join(folder, `${task.side}-${name}`)
  await runChain([
    ['vips', 'thumbnail', photograph, at('scaled.v'), String(task.sourceWidth), '--height', String(task.sourceHeight), '--crop', 'centre'],
    ['vips', 'gaussnoise', at('noise.v'), String(task.sourceWidth), String(task.sourceHeight), '--sigma', '4', '--mean', '0', '--seed', '1'],
    ['vips', 'add', at('scaled.v'), at('noise.v'), at('noisy.v')],
    ['vips', 'cast', at('noisy.v'), at('bytes.v'), 'uchar'],
    ['vips', 'copy', at('bytes.v'), at('tagged.v'), '--interpretation', 'srgb'],
    ['vips', 'jpegsave', at('tagged.v'), at('photo.jpg'), '--Q', '92'],
  ], {})
  for (const name of ['scaled', 'noise', 'noisy', 'bytes', 'tagged']) rmSync(at(`${name}.v`))
  return at('photo.jpg')
}

function libvipsChain(source: string, side: number, folder: string): string[][] {
  const at = (name: string) => join(folder, name)
  return [
    ['vips', 'thumbnail', source, at('a.v'), String(side), '--height', String(side), '--size', 'force', '--crop', 'centre'],
    ['vips', 'colourspace', at('a.v'), at('b.v'), 'grey16'],
    ['vips', 'maplut', at('b.v'), at('c.v'), at('table.v')],
    ['vips', 'flip', at('c.v'), at('d.v'), 'horizontal'],
    ['vips', 'tiffsave', at('d.v'), at('chain.tif'), '--compression', 'lzw', '--predictor', 'horizontal', '--xres', '14.1732', '--yres', '14.1732'],
  ]
}

const imageMagick = (source: string, side: number, folder: string) => ['convert', source, '-colorspace', 'Gray', '-depth', '16',
  '-resize', `${side}x${side}^`, '-gravity', 'center', '-extent', `${side}x${side}`, '(', '-size', '1x4096', 'gradient:', ')', '-clut', '-flop', '-density', '360', '-compress', 'LZW', join(folder, 'magick.tif')]

function filmOrder(task: Task, format: FilmOrder['format']): FilmOrder {
  const width = task.sourceHeight / task.sourceWidth
  return {
    format, geometry: { quarterTurns: 0, straightenDegrees: 0, crop: { x: (1 - width) / 2, y: 0, width, height: 1 } },
    tone: {
      adjustments: { mix: { red: 1, green: 1, blue: 1 }, blackPoint: 0, whitePoint: 1, midtone: 0, contrast: 0 }, aim: 'even-lightness',
      response: Array.from({ length: 1025 }, (_, i) => 18 + 77 * (i / 1024) ** 0.7),
    },
    picture: { widthPixels: task.side, heightPixels: task.side }, margin: { pixels: 0, kind: 'clear' }, pixelsPerInch: 360, mirror: true, inkColor: '#000000',
    marks: { ruler: false, label: false, labelText: 'Bench' }, filmMm: { width: task.side * 25.4 / 360, height: task.side * 25.4 / 360 },
  }
}

const restartPeak = (processId: number) => writeFileSync(`/proc/${processId}/clear_refs`, '5')

/** One film by the warm child; memory is its peak less what the idle process holds. */
async function makeFilm(child: ImageChild, idleBytes: number, path: string, target: string, order: FilmOrder): Promise<Spent> {
  rmSync(target, { force: true })
  if (existsSync('/proc/self/clear_refs')) restartPeak(child.processId!)
  const started = performance.now()
  await child.call('film', { path, target, order, renderKey: 'bench' })
  return { seconds: (performance.now() - started) / 1000, peakBytes: Math.max(0, peakBytesOf(child.processId) - idleBytes) }
}

type Way = 'tiff' | 'pdf' | 'libvips' | 'magick'

async function compare(task: Task, ways: Way[], context: SuiteContext): Promise<Record<Way, Spent>> {
  const { folder } = context
  const source = await makeSource(task, folder)
  const child = openImageChild({ programPath: context.imageChildProgram, addressSpaceBytes: 8e9, timeoutSeconds: 600, threads })
  const spent: Record<Way, Spent[]> = { tiff: [], pdf: [], libvips: [], magick: [] }
  const env = { VIPS_CONCURRENCY: String(threads), MAGICK_THREAD_LIMIT: String(threads), OMP_NUM_THREADS: String(threads) }
  try {
    await child.call('probe', { path: source })
    const idleBytes = peakBytesOf(child.processId)
    const film = (format: 'tiff' | 'pdf') => makeFilm(child, idleBytes, source, join(folder, `film.${format}`), filmOrder(task, format))
    const run: Record<Way, () => Promise<Spent>> = {
      tiff: () => film('tiff'), pdf: () => film('pdf'),
      libvips: () => runChain(libvipsChain(source, task.side, folder), env),
      magick: () => runCommand(imageMagick(source, task.side, folder), env),
    }
    await film('tiff')
    for (let round = 0; round < rounds; round++) for (const way of ways) spent[way].push(await run[way]())
  }
  finally {
    await child.close()
  }
  const middle = (runs: Spent[]) => ({ seconds: median(runs.map(one => one.seconds)), peakBytes: median(runs.map(one => one.peakBytes)) })
  return { tiff: middle(spent.tiff), pdf: middle(spent.pdf), libvips: middle(spent.libvips), magick: middle(spent.magick) }
}

const isHere = (command: string[]) => runCommand(command).then(() => true, () => false)

function* rowsOf(task: Task, ways: Way[], { tiff, pdf, libvips, magick }: Record<Way, Spent>): Generator<Measure> {
  yield measured(`${task.label} TIFF`, tiff.seconds, 's')
  yield measured(`${task.label} TIFF, memory above idle`, tiff.peakBytes / 1e6, 'MB')
  yield measured(`${task.label}, libvips' commands`, libvips.seconds, 's')
  yield measured(`${task.label}, libvips' commands, memory`, libvips.peakBytes / 1e6, 'MB')
  yield measured(`${task.label} TIFF, time against libvips' commands`, tiff.seconds / libvips.seconds, '×', 0.6)
  yield measured(`${task.label} TIFF, memory against libvips' commands`, tiff.peakBytes / libvips.peakBytes, '×', task === tasks.large ? 1 : null)
  yield measured(`${task.label} PDF, time against the TIFF`, pdf.seconds / tiff.seconds, '×', 1.2)
  if (!ways.includes('magick')) return
  yield measured(`${task.label} TIFF, time against ImageMagick`, tiff.seconds / magick.seconds, '×', 0.4)
  yield measured(`${task.label} TIFF, memory against ImageMagick`, tiff.peakBytes / magick.peakBytes, '×', 0.5)
}

export async function* run(context: SuiteContext): AsyncGenerator<Measure> {
  if (!existsSync(photograph)) return yield notMeasured('films against other programs', '×', null, 'Debian’s libjxl-testdata is not installed')
  if (!await isHere(['vips', '--version'])) return yield notMeasured('films against other programs', '×', null, 'Debian’s libvips-tools are not installed')
  const hasMagick = await isHere(['convert', '-version'])
  const at = (name: string) => join(context.folder, name)
  await runChain([['vips', 'identity', at('straight.v'), '--ushort'], ['vips', 'invert', at('straight.v'), at('table.v')]], {})
  const ways: Way[] = hasMagick ? ['tiff', 'libvips', 'magick', 'pdf'] : ['tiff', 'libvips', 'pdf']
  yield* rowsOf(tasks.phone, ways, await compare(tasks.phone, ways, context))
  if (!hasMagick) yield notMeasured('against ImageMagick', '×', 0.4, 'Debian’s imagemagick is not installed')
  yield* rowsOf(tasks.large, ['tiff', 'libvips', 'pdf'], await compare(tasks.large, ['tiff', 'libvips', 'pdf'], context))
}
