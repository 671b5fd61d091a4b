import { seededRandom } from '../../../shared/calibration/random'
import type { SeededRandom } from '../../../shared/calibration/random'
import type { ScanPicture } from '../../../shared/calibration/reading/picture'
import type { WedgePage } from '../../../shared/calibration/wedge/page'
import { paintWedge } from '../../../shared/calibration/wedge/paint'
import { scatteredPage } from '../../../shared/calibration/wedge/scattered-page'
import type { ScatteredGrid } from '../../../shared/calibration/wedge/scattered-page'
import { snapWedgePage } from '../../../shared/calibration/wedge/snap'
import type { Camera, Point } from './camera'
import type { PhonePlacement } from './cameras'
import { flatbed, phone } from './cameras'
import { codeModules, codeOfSeed } from './code'
import type { PrintModel, SimulatedPrint } from './print'
import { simulatePrint } from './print'
import type { Optics } from './take-picture'
import { takePicture } from './take-picture'

/** A wedge's page with what stands in it. */
export interface WedgeOnFilm { page: WedgePage, levels: number[] }

/** A picture whose truth is known. */
export interface Scene extends WedgeOnFilm { code: string, print: SimulatedPrint, camera: Camera, picture: ScanPicture, lightnessOf: (level: number) => number }

/** Resolution of the film files and of the prints made from them. */
const filmPixelsPerInch = 360

/** A page with random levels in 8-bit codes. */
export function wedgeOnFilm(grid: ScatteredGrid, seed: number): WedgeOnFilm {
  const random = seededRandom(seed)
  const page = snapWedgePage(scatteredPage(grid), filmPixelsPerInch)
  return { page, levels: page.patches.map(() => random.below(256) / 255) }
}

/** A smooth response from the deepest tone to paper white; `bend` below 1 lightens the middle. */
export const responseOf = (black: number, white: number, bend: number) => (level: number): number =>
  black + (white - black) * (1 - Math.cos(Math.PI * level ** bend)) / 2

/** The print of a wedge, whose code follows from the model's seed. */
export const printOf = ({ page, levels }: WedgeOnFilm, model: PrintModel): SimulatedPrint =>
  simulatePrint(paintWedge(page, levels, codeModules(codeOfSeed(model.seed)), filmPixelsPerInch), model)

/** Tones of three processes' prints: neutral, blue and brown (a* and b* by L*, from memory of their look). */
const hues: ((lightness: number) => readonly [number, number])[] = [
  () => [0, 2], lightness => [2 * (1 - lightness / 95), -38 * (1 - lightness / 95) * Math.min(1, lightness / 15)],
  lightness => [10 * (1 - lightness / 95), 4 + 16 * (1 - lightness / 95) * Math.min(1, lightness / 20)],
]

const grids: ScatteredGrid[] = [{ columns: 24, rows: 16 }, { columns: 16, rows: 12 }]

/**
 * A scan or phone picture somewhere within the limits that reading is made for. Scans: 150 … 400 pixels per inch, any quarter turn,
 * skew to ±5°, one in eight mirrored, waves to 1 mm, blur to 1.2 pixels, noise to 2 codes, dust and hairs. Phones: 5 … 12
 * megapixels, the whole film in the frame, tilt to 22° each way, roll within 12° of a
 * quarter turn, distortion to 3 %, waves to 1.5 mm, light falling by a third, a device's tone curve, noise to 4 codes, blur to 2 pixels. Prints: typical to rough coating, black 8 … 35, white 86 … 96.
 */
export function randomScene(seed: number, kind: 'scan' | 'phone'): Scene {
  const random = seededRandom(seed)
  const between = (low: number, high: number): number => low + (high - low) * random.uniform()
  const wedge = wedgeOnFilm(grids[random.below(2)]!, seed)
  const lightnessOf = responseOf(between(8, 35), between(86, 96), between(0.5, 1.6))
  const print = printOf(wedge, {
    lightnessOf, seed, gradientLightness: between(0, 3), mottleLightness: between(0, 2), textureLightness: between(0, 4), fallOffShare: between(0, 0.15),
    coatingMarginMm: between(8, 18), beyondLightness: between(15, 97),
  })
  const [camera, optics] = kind === 'scan' ? scanner(wedge.page, random, between) : phoneCamera(wedge.page, random, between)
  const picture = takePicture(print, camera, { seed, hue: hues[random.below(hues.length)], ...optics })
  return { ...wedge, code: codeOfSeed(seed), print, camera, picture, lightnessOf }
}

type Between = (low: number, high: number) => number

function scanner(page: WedgePage, random: SeededRandom, between: Between): [Camera, Optics] {
  const camera = flatbed(page, {
    pixelsPerInch: Math.round(between(150, 400)), skewDegrees: between(-5, 5), quarterTurns: random.below(4), mirrored: random.below(8) === 0,
    warpMm: between(0, 1), marginMm: between(10, 30), seed: random.below(1e6),
  })
  return [camera, { blurPx: between(0.3, 1.2), noiseCodes: between(0.4, 2), soilCount: between(0, 60), glareShare: between(0, 0.02), glareRadiusPx: 80 }]
}

function phoneCamera(page: WedgePage, random: SeededRandom, between: Between): [Camera, Optics] {
  const size = between(2500, 4000)
  const upright = random.below(2) === 0
  const [width, height] = upright ? [size * 0.75, size] : [size, size * 0.75]
  const camera = wholePageInFrame(page, {
    width: Math.round(width), height: Math.round(height), filled: between(0.7, 1.3),
    tiltXDegrees: between(-22, 22), tiltYDegrees: between(-22, 22), rollDegrees: between(-12, 12) + (upright ? 90 : 0) + 180 * random.below(2),
    distortion: between(-0.03, 0.01), warpMm: between(0, 1.5), seed: random.below(1e6),
  })
  const [fall, vignette, lean] = [between(0, 0.35), between(0, 0.5), random.below(2)]
  return [camera, {
    blurPx: between(0.6, 2), noiseCodes: between(1, 4), toneCurve: v => v + 0.12 * Math.sin(2 * Math.PI * v) / -Math.PI,
    light: (u, v) => 0.95 * (1 - fall * (lean ? u : v)) * (1 - vignette * ((u - 0.5) ** 2 + (v - 0.5) ** 2)),
  }]
}

/** Steps back until the film's four corners lie in the frame. */
function wholePageInFrame(page: WedgePage, placement: PhonePlacement): Camera {
  const camera = phone(page, placement)
  const inside = [[0, 0], [page.widthMm, 0], [page.widthMm, page.heightMm], [0, page.heightMm]].every((corner) => {
    const [x, y] = camera.toPicture(corner as unknown as Point)
    return x > 0 && y > 0 && x < placement.width && y < placement.height
  })
  return inside ? camera : wholePageInFrame(page, { ...placement, filled: placement.filled * 0.95 })
}
