import { rmSync, writeFileSync } from 'node:fs'
import { join } from 'node:path'
import { seededRandom, type SeededRandom } from '../../../shared/calibration/random'
import type { ScanPicture } from '../../../shared/calibration/reading/picture'
import type { Camera } from '../../../tests/support/scan-simulator/camera'
import { flatbed } from '../../../tests/support/scan-simulator/cameras'
import { codeModules, codeOfSeed } from '../../../tests/support/scan-simulator/code'
import { printOf, responseOf, wedgeOnFilm } from '../../../tests/support/scan-simulator/scenes'
import { takePicture } from '../../../tests/support/scan-simulator/take-picture'
import { type ImageChild, openImageChild } from '../../image/pool'
import { median, processorSecondsOf, runCommand } from './commands'
import { type Measure, measured } from './suite'

/** Codes drawn, spoiled by ImageMagick and read; BENCH_READING_CODES makes a quicker or a longer run. */
const codes = Number(process.env.BENCH_READING_CODES ?? 1000)
/** A module of the 20 mm symbol at 200 pixels per inch. */
const modulePx = 7.5
const runs = 5
/** A4 at 600 pixels per inch. */
const a4 = { width: 4961, height: 7016 }

/** The child as the service runs it, from files on disk: time beyond the upload, and whether a code is ever taken for another. */
export async function* throughChild(programPath: string, folder: string): AsyncIterable<Measure> {
  const child = openImageChild({ programPath, addressSpaceBytes: 8e9, timeoutSeconds: 180 })
  try {
    yield* largeScans(child, folder)
    yield* spoiledCodes(child, folder)
  }
  finally {
    await child.close()
  }
}

async function* largeScans(child: ImageChild, folder: string): AsyncIterable<Measure> {
  const wedge = wedgeOnFilm({ columns: 24, rows: 24 }, 1)
  const print = printOf(wedge, { lightnessOf: responseOf(15, 95, 0.8), seed: 1, textureLightness: 2 })
  const onGlass: Camera = { ...flatbed(wedge.page, { pixelsPerInch: 600, skewDegrees: 3, warpMm: 0.5, quarterTurns: 1 }), ...a4 }
  const raw = join(folder, 'scan.ppm')
  writePpm(raw, takePicture(print, onGlass, { blurPx: 0.8, noiseCodes: 1 }))
  for (const [name, goal, options] of [['jpg', 2, ['-quality', '92']], ['tif', 2, ['-compress', 'none']], ['png', null, ['-quality', '16']]] as const) {
    const path = join(folder, `scan.${name}`)
    await runCommand(['convert', raw, ...options, path])
    const spent: { seconds: number, processorSeconds: number }[] = []
    for (let run = 0; run <= runs; run++) {
      const started = performance.now(), used = processorSecondsOf(child.processId)
      const seen = await child.call('identifyScan', { path, pages: [wedge.page] })
      const report = await child.call('readScan', { path, page: wedge.page, levels: wedge.levels })
      spent.push({ seconds: (performance.now() - started) / 1000, processorSeconds: processorSecondsOf(child.processId) - used })
      if (!report.found || seen.code !== codeOfSeed(1)) throw new Error('The large scan was not read.')
    }
    const title = `A4 at 600 pixels per inch from a ${name} file, through the child`
    yield measured(`${title}, first, by the clock`, spent[0]!.seconds, 's', goal)
    yield measured(`${title}, later, by the clock`, median(spent.slice(1).map(run => run.seconds)), 's', goal)
    yield measured(`${title}, later, processor time`, median(spent.slice(1).map(run => run.processorSeconds)), 's', goal)
    rmSync(path)
  }
  rmSync(raw)
}

function writePpm(path: string, { width, height, codes }: ScanPicture): void {
  writeFileSync(path, Buffer.concat([Buffer.from(`P6\n${width} ${height}\n255\n`), Buffer.from(codes.buffer, codes.byteOffset, codes.byteLength)]))
}

/** Codes turned any way, in perspective, blurred, noisy and packed hard, by ImageMagick; read from the whole picture, the harder way. */
async function* spoiledCodes(child: ImageChild, folder: string): AsyncIterable<Measure> {
  const [plain, spoiled] = [join(folder, 'code.pgm'), join(folder, 'code.jpg')]
  let [unread, wrong] = [0, 0]
  for (let seed = 1; seed <= codes; seed++) {
    const code = codeOfSeed(seed)
    drawPad(plain, code)
    await runCommand(['convert', plain, ...spoiling(seededRandom(seed)), spoiled])
    const seen = await child.call('identifyScan', { path: spoiled, pages: [] })
    if (seen.code === null) unread++
    else if (seen.code !== code) wrong++
  }
  yield measured(`codes taken for another, of ${codes} spoiled by ImageMagick`, wrong, 'codes', 0)
  yield measured('codes not read', unread / codes, 'share', 0.01)
}

/** The code on its pad in a dark surrounding: paper white where the film holds ink. */
function drawPad(path: string, code: string): void {
  const modules = codeModules(code)
  const side = Math.round(41 * modulePx)
  const pixels = Buffer.alloc(side * side)
  for (let y = 0, at = 0; y < side; y++) {
    for (let x = 0; x < side; x++, at++) {
      const [u, v] = [Math.floor(x / modulePx) - 10, Math.floor(y / modulePx) - 10]
      const isPad = u >= -3 && v >= -3 && u < 24 && v < 24
      const isDark = u >= 0 && v >= 0 && u < 21 && v < 21 && modules[21 * v + u]
      pixels[at] = isPad && !isDark ? 235 : 45
    }
  }
  writeFileSync(path, Buffer.concat([Buffer.from(`P5\n${side} ${side}\n255\n`), pixels]))
}

function spoiling(random: SeededRandom): string[] {
  const side = Math.round(41 * modulePx)
  const near = (value: number): string => (value + (random.uniform() - 0.5) * 0.16 * side).toFixed(1)
  const corners = [[0, 0], [side, 0], [side, side], [0, side]].map(([x, y]) => `${x},${y} ${near(x!)},${near(y!)}`).join('  ')
  return [
    ...random.below(8) === 0 ? ['-flop'] : [], '-background', 'gray18', '-virtual-pixel', 'edge', '-distort', 'Perspective', corners, '-rotate', (360 * random.uniform()).toFixed(1),
    '-gaussian-blur', `0x${(0.4 + 1.8 * random.uniform()).toFixed(2)}`, '-seed', String(random.below(1e6)), '-attenuate', (0.5 * random.uniform()).toFixed(2), '+noise', 'Gaussian',
    '-quality', String(40 + random.below(55)),
  ]
}
