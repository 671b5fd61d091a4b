import { seededRandom } from '../../../shared/calibration/random'
import type { LevelRaster } from '../../../shared/calibration/wedge/paint'
import { luminanceFromLightness } from '../../../shared/tone/lightness'

/** A print as reflected light, page coordinates in mm at `pixelsPerInch`, with paper around the film. */
export interface SimulatedPrint {
  widthPx: number
  heightPx: number
  pixelsPerInch: number
  /** Page coordinate of the raster's top-left corner (negative: paper beyond the film), mm. */
  originMm: readonly [number, number]
  /** Luminance, perfect diffuser = 1. */
  luminance: Float32Array
  /** Luminance of what lies beyond the raster: the table or the scanner's lid. */
  beyond: number
}

/** What happens between film and dry print. Amounts in L* are of the deepest tone; all default to none. */
export interface PrintModel {
  /** L* of the print where the film has this ink level (0 … 1). */
  lightnessOf: (level: number) => number
  seed: number
  /** Difference of coating from left to right and top to bottom, L*. */
  gradientLightness?: number
  /** Smooth blotches: standard deviation, L*, over about 15 mm. */
  mottleLightness?: number
  /** Paper texture: standard deviation of each pixel at 300 ppi, L*. */
  textureLightness?: number
  /** Loss of the lamp's light from the centre to the corners (0.1 = 10 %). */
  fallOffShare?: number
  /** Paper around the film and how far the coating reaches beyond it, mm. */
  paperMarginMm?: number
  coatingMarginMm?: number
  beyondLightness?: number
  /** Print turned over: film exposed wrong side up. */
  wrongSideUp?: boolean
}

/** Change of L* per unit of log₁₀ exposure in the middle tones of the simulated papers. */
const lightnessPerLogExposure = 60

/** A print of a wedge's film page. */
export function simulatePrint(film: LevelRaster, model: PrintModel): SimulatedPrint {
  const { pixelsPerInch } = film
  const marginPx = Math.round((model.paperMarginMm ?? 20) / 25.4 * pixelsPerInch)
  const coatedPx = Math.round((model.coatingMarginMm ?? 15) / 25.4 * pixelsPerInch)
  const [widthPx, heightPx] = [film.widthPx + 2 * marginPx, film.heightPx + 2 * marginPx]
  const luminance = new Float32Array(widthPx * heightPx)
  const tones = Float32Array.from({ length: 256 }, (_, code) => model.lightnessOf(code / 255))
  const [black, white] = [tones[0]!, tones[255]!]
  const spots = unevenness(model, film)
  for (let y = 0, at = 0; y < heightPx; y++) {
    const v = y - marginPx
    const overY = Math.max(-v - 1, v - film.heightPx)
    for (let x = 0; x < widthPx; x++, at++) {
      const u = x - marginPx
      const over = Math.max(-u - 1, u - film.widthPx, overY)
      const column = model.wrongSideUp ? film.widthPx - 1 - u : u
      const lightness = over < 0 ? tones[film.codes[v * film.widthPx + column]!]! : over < coatedPx ? black : white
      luminance[at] = luminanceOf(lightness + spots(u, v, (lightness - black) / (white - black)))
    }
  }
  return { widthPx, heightPx, pixelsPerInch, originMm: [-marginPx / pixelsPerInch * 25.4, -marginPx / pixelsPerInch * 25.4], luminance, beyond: luminanceFromLightness(model.beyondLightness ?? 96) }
}

const table = Float32Array.from({ length: 12001 }, (_, i) => luminanceFromLightness(i / 100))
const luminanceOf = (lightness: number): number => table[Math.min(12000, Math.max(0, Math.round(lightness * 100)))]!

/** Shift of L* at a place of the film (pixels) that has this tone (0 deepest … 1 paper). */
function unevenness(model: PrintModel, film: LevelRaster): (x: number, y: number, tone: number) => number {
  const random = seededRandom(model.seed)
  const angle = random.uniform() * 2 * Math.PI
  const [gx, gy] = [Math.cos(angle), Math.sin(angle)]
  const mottle = smoothNoise(model.seed + 1, 15 / 25.4 * film.pixelsPerInch)
  const grain = Float32Array.from({ length: 1 << 16 }, () => (model.textureLightness ?? 0) * film.pixelsPerInch / 300 * random.normal())
  const [gradient, blotches, fallOff] = [model.gradientLightness ?? 0, model.mottleLightness ?? 0, model.fallOffShare ?? 0]
  let n = 0
  return (x, y, tone) => {
    if (x === 0) n = random.below(grain.length)
    n = (n + 1) & (grain.length - 1)
    let shift = grain[n]!
    const fx = x / film.widthPx - 0.5, fy = y / film.heightPx - 0.5
    if (gradient) shift += (1 - tone) * gradient * (fx * gx + fy * gy)
    if (blotches) shift += (1 - tone) * blotches * mottle(x, y)
    if (fallOff) shift -= 4 * tone * (1 - tone) * lightnessPerLogExposure * Math.log10(1 - fallOff * 2 * (fx * fx + fy * fy))
    return shift
  }
}

/** Smooth noise of about unit variance: normals on a lattice, blended with cosines. */
function smoothNoise(seed: number, lattice: number): (x: number, y: number) => number {
  const random = seededRandom(seed)
  const values = Float32Array.from({ length: 64 * 64 }, () => random.normal())
  const blend = (t: number): number => (1 - Math.cos(Math.PI * t)) / 2
  return (x, y) => {
    const u = x / lattice + 8, v = y / lattice + 8
    const i = Math.floor(u), j = Math.floor(v)
    const p = blend(u - i), q = blend(v - j)
    const upper = (j & 63) * 64, lower = ((j + 1) & 63) * 64
    const left = i & 63, right = (i + 1) & 63
    return 1.5 * ((values[upper + left]! * (1 - p) + values[upper + right]! * p) * (1 - q) + (values[lower + left]! * (1 - p) + values[lower + right]! * p) * q)
  }
}
