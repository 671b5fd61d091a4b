import { locateWedge } from '../../../shared/calibration/reading/locate-wedge'
import type { ScanPicture } from '../../../shared/calibration/reading/picture'
import { readScan } from '../../../shared/calibration/reading/read-scan'
import { centreOf } from '../../../shared/calibration/wedge/page'
import { scatteredGrids, scatteredPage } from '../../../shared/calibration/wedge/scattered-page'
import { snapWedgePage } from '../../../shared/calibration/wedge/snap'
import type { Camera } from '../../../tests/support/scan-simulator/camera'
import { flatbed } from '../../../tests/support/scan-simulator/cameras'
import type { Scene, WedgeOnFilm } from '../../../tests/support/scan-simulator/scenes'
import { printOf, randomScene, responseOf, wedgeOnFilm } from '../../../tests/support/scan-simulator/scenes'
import { takePicture } from '../../../tests/support/scan-simulator/take-picture'
import { identifyWedge } from '../../image/scan/identity'
import { throughChild } from './reading-child'
import type { Measure, Suite } from './suite'
import { measured } from './suite'

/** Pictures of each kind; BENCH_READING_PICTURES makes a quicker or a longer run. */
const picturesOfEachKind = Number(process.env.BENCH_READING_PICTURES ?? 150)
/** Noise-free prints read for the patch error. */
const cleanScans = 12
/** A4 at 600 pixels per inch. */
const [a4Width, a4Height] = [4961, 7016]
/** Every corner within this of the truth counts as found, mm. */
const foundWithinMm = 1

const pages = scatteredGrids.map(grid => snapWedgePage(scatteredPage(grid), 360))

/** Finding, exactness and speed of reading, on simulated scans and phone pictures with seeds; then files through the image child. */
export const run: Suite = async function* ({ imageChildProgram, folder }) {
  yield* finding('scan')
  yield* finding('phone')
  yield* exactness()
  yield* speed()
  yield* throughChild(imageChildProgram, folder)
}

async function* finding(kind: 'scan' | 'phone'): AsyncIterable<Measure> {
  const errors: number[] = []
  let [missed, wrongPage, unnamed, misnamed] = [0, 0, 0, 0]
  for (let seed = 1; seed <= picturesOfEachKind; seed++) {
    const scene = randomScene(seed, kind)
    const located = locateWedge(scene.picture, pages)
    if (located && located.page.columns * located.page.rows !== scene.page.patches.length) wrongPage++
    const errorPx = located ? cornerErrorPx(scene, located.corners) : Infinity
    if (errorPx < foundWithinMm * pixelsPerMm(scene)) errors.push(errorPx)
    else missed++
    const code = await identifyWedge(scene.picture, located)
    if (code === null) unnamed++
    else if (code !== scene.code) misnamed++
  }
  errors.sort((a, b) => a - b)
  const goal = kind === 'scan' ? 0.3 : null
  yield measured(`${kind}s not found, of ${picturesOfEachKind}`, missed / picturesOfEachKind, 'share', 0.01)
  yield measured(`${kind}s whose code was not read`, unnamed / picturesOfEachKind, 'share', 0.01)
  yield measured(`${kind}s taken for another wedge`, misnamed, 'pictures', 0)
  yield measured(`${kind}s taken for another size of wedge`, wrongPage, 'pictures', 0)
  yield measured(`worst corner of a ${kind}, median`, errors[errors.length >> 1] ?? NaN, 'px', goal)
  yield measured(`worst corner of a ${kind}, 95th percentile`, errors[Math.floor(errors.length * 0.95)] ?? NaN, 'px', goal)
  yield measured(`worst corner of a ${kind}, greatest`, errors.at(-1) ?? NaN, 'px', goal)
}

const cornerErrorPx = ({ page, camera }: Scene, corners: readonly (readonly [number, number])[]): number => Math.max(...corners.map(([x, y], id) => {
  const [u, v] = camera.toPicture(centreOf(page.markers[id]!.place))
  return Math.hypot(u - x, v - y)
}))

function pixelsPerMm({ page, camera }: Scene): number {
  const [a, b] = [0, 1].map(id => camera.toPicture(centreOf(page.markers[id]!.place))) as [readonly [number, number], readonly [number, number]]
  return Math.hypot(b[0] - a[0], b[1] - a[1]) / (page.widthMm - 8)
}

/** Noise-free prints on a flatbed at 300 pixels per inch, skewed to ±5°, gently warped, 8 bits with a scanner's noise. */
function* exactness(): Iterable<Measure> {
  const lightnessOf = responseOf(15, 95, 0.8)
  const wedge = wedgeOnFilm({ columns: 24, rows: 16 }, 1)
  const print = printOf(wedge, { lightnessOf, seed: 1 })
  const worst: number[] = []
  for (let seed = 1; seed <= cleanScans; seed++) {
    const camera = flatbed(wedge.page, { pixelsPerInch: 300, skewDegrees: -5 + 10 * (seed - 1) / (cleanScans - 1), quarterTurns: seed % 4, warpMm: 0.5, seed })
    worst.push(worstPatch(wedge, takePicture(print, camera, { seed, blurPx: 0.6, noiseCodes: 0.7 }), lightnessOf))
  }
  worst.sort((a, b) => a - b)
  yield measured(`worst of 384 patches, median of ${cleanScans} clean scans`, worst[cleanScans >> 1]!, 'L*', 0.15)
  yield measured(`worst of 384 patches, greatest of ${cleanScans} clean scans`, worst.at(-1)!, 'L*', 0.15)
}

function worstPatch({ page, levels }: WedgeOnFilm, picture: ScanPicture, lightnessOf: (level: number) => number): number {
  const report = readScan(picture, [page], { levels })
  return report.found ? Math.max(...report.patches.map((patch, i) => Math.abs((patch?.lightness ?? Infinity) - lightnessOf(levels[i]!)))) : Infinity
}

/** The largest wedge on an A4 scan at 600 pixels per inch, 35 megapixels in three 8-bit channels; the first run is warming up. */
function* speed(): Iterable<Measure> {
  const wedge = wedgeOnFilm({ columns: 24, rows: 24 }, 1)
  const print = printOf(wedge, { lightnessOf: responseOf(15, 95, 0.8), seed: 1, textureLightness: 2 })
  const onGlass: Camera = { ...flatbed(wedge.page, { pixelsPerInch: 600, skewDegrees: 3, warpMm: 0.5, quarterTurns: 1 }), width: a4Width, height: a4Height }
  const picture = takePicture(print, onGlass, { blurPx: 0.8, noiseCodes: 1 })
  const runs = Array.from({ length: 6 }, () => timed(() => readScan(picture, [wedge.page], { levels: wedge.levels })))
  const median = (of: (run: { seconds: number, cpuSeconds: number }) => number): number => runs.slice(1).map(of).sort((a, b) => a - b)[2]!
  yield measured('A4 at 600 pixels per inch, cold, processor time', runs[0]!.cpuSeconds, 's', 2)
  yield measured('A4 at 600 pixels per inch, warm, processor time', median(run => run.cpuSeconds), 's', 2)
  yield measured('A4 at 600 pixels per inch, warm, by the clock', median(run => run.seconds), 's', 2)
}

function timed(work: () => void): { seconds: number, cpuSeconds: number } {
  const [cpu, clock] = [process.cpuUsage(), performance.now()]
  work()
  const { user, system } = process.cpuUsage(cpu)
  return { seconds: (performance.now() - clock) / 1000, cpuSeconds: (user + system) / 1e6 }
}
