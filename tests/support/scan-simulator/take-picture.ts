import type { SeededRandom } from '../../../shared/calibration/random'
import { seededRandom } from '../../../shared/calibration/random'
import type { ScanPicture } from '../../../shared/calibration/reading/picture'
import { srgb8, tone16 } from '../../../shared/calibration/reading/picture'
import { srgbFromXyz } from '../../../shared/tone/colour-spaces'
import { xyzFromLab } from '../../../shared/tone/lab'
import { lightnessFromLuminance } from '../../../shared/tone/lightness'
import { transform } from '../../../shared/tone/matrix'
import { linearToSrgb } from '../../../shared/tone/srgb'
import type { Camera } from './camera'
import { nodeSpacing, pageAtNodes } from './camera'
import type { Plane } from './planes'
import { blur, soil, strayLight } from './planes'
import type { SimulatedPrint } from './print'

/** What optics and electronics do to the light. All default to none. */
export interface Optics {
  seed?: number
  /** Standard deviation of the blur, pixels. */
  blurPx?: number
  /** Share of light that strays, and how far, pixels. */
  glareShare?: number
  glareRadiusPx?: number
  /** Marks per ten million pixels and their size, pixels. */
  soilCount?: number
  soilPx?: number
  /** Light that reaches a place of the frame (0 … 1 across and down), as a factor. */
  light?: (u: number, v: number) => number
  /** The device's own tone curve on sRGB-coded values 0 … 1. */
  toneCurve?: (coded: number) => number
  /** Standard deviation of noise, 8-bit codes. */
  noiseCodes?: number
  /** a* and b* of a print's tone at L*; neutral when left out. */
  hue?: (lightness: number) => readonly [number, number]
  inverted?: boolean
  /** `srgb8` (default): three 8-bit channels. `tone16`: one L*-coded 16-bit channel, without hue, curve or noise. */
  kind?: 'srgb8' | 'tone16'
}

/** A picture of a print. */
export function takePicture(print: SimulatedPrint, camera: Camera, optics: Optics = {}): ScanPicture {
  const plane = project(print, camera)
  const random = seededRandom(optics.seed ?? 1)
  if (optics.light) shade(plane, optics.light)
  strayLight(plane, optics.glareShare ?? 0, optics.glareRadiusPx ?? 80)
  if (optics.soilCount) soil(plane, optics.soilCount, optics.soilPx ?? 3, random)
  blur(plane, optics.blurPx ?? 0)
  return optics.kind === 'tone16' ? toneCodes(plane) : colourCodes(plane, optics, random)
}

function project(print: SimulatedPrint, camera: Camera): Plane {
  const { columns, pages } = pageAtNodes(camera, [0, 0])
  const { width, height } = camera
  const values = new Float32Array(width * height)
  const perMm = print.pixelsPerInch / 25.4
  const sub = subsamples(print, camera)
  const [ox, oy] = print.originMm
  for (let y = 0; y < height; y++) {
    for (let j = 0; j < sub; j++) {
      const v = (y + (j + 0.5) / sub) / nodeSpacing
      const row = Math.floor(v)
      const q = v - row
      for (let x = 0, at = y * width; x < width; x++, at++) {
        for (let i = 0; i < sub; i++) {
          const u = (x + (i + 0.5) / sub) / nodeSpacing
          const column = u | 0
          const p = u - column
          const n = 2 * (row * columns + column)
          const m = n + 2 * columns
          const mmX = (pages[n]! * (1 - p) + pages[n + 2]! * p) * (1 - q) + (pages[m]! * (1 - p) + pages[m + 2]! * p) * q
          const mmY = (pages[n + 1]! * (1 - p) + pages[n + 3]! * p) * (1 - q) + (pages[m + 1]! * (1 - p) + pages[m + 3]! * p) * q
          values[at]! += samplePrint(print, (mmX - ox) * perMm - 0.5, (mmY - oy) * perMm - 0.5) / (sub * sub)
        }
      }
    }
  }
  return { width, height, values }
}

/** Points along a picture pixel's side that an even mean of the print needs. */
function subsamples(print: SimulatedPrint, { toPicture }: Camera): number {
  const [a, b] = [toPicture([50, 50]), toPicture([60, 50])]
  const picturePerMm = Math.hypot(b[0] - a[0], b[1] - a[1]) / 10
  return Math.max(1, Math.round(print.pixelsPerInch / 25.4 / picturePerMm + 0.2))
}

function samplePrint({ widthPx, heightPx, luminance, beyond }: SimulatedPrint, x: number, y: number): number {
  if (x < 0 || y < 0 || x >= widthPx - 1 || y >= heightPx - 1) return beyond
  const i = x | 0, j = y | 0
  const p = x - i, q = y - j
  const at = j * widthPx + i
  return (luminance[at]! * (1 - p) + luminance[at + 1]! * p) * (1 - q) + (luminance[at + widthPx]! * (1 - p) + luminance[at + widthPx + 1]! * p) * q
}

function shade({ width, height, values }: Plane, light: (u: number, v: number) => number): void {
  for (let y = 0, at = 0; y < height; y++) for (let x = 0; x < width; x++, at++) values[at]! *= light(x / width, y / height)
}

function toneCodes({ width, height, values }: Plane): ScanPicture {
  const codes = Uint16Array.from(values, y => Math.round(655.35 * lightnessFromLuminance(Math.min(1, Math.max(0, y)))))
  return { width, height, channels: 1, codes, colour: tone16() }
}

const tableSize = 16384

function colourCodes({ width, height, values }: Plane, optics: Optics, random: SeededRandom): ScanPicture {
  const tables = channelTables(optics)
  const noise = noiseTable(optics.noiseCodes ?? 0, random)
  const codes = new Uint8ClampedArray(3 * values.length)
  const inverted = optics.inverted ?? false
  for (let i = 0, at = 0, n = 0; i < values.length; i++) {
    const light = values[i]! * (tableSize - 1) + 0.5
    const index = light < 0 ? 0 : light >= tableSize ? tableSize - 1 : light | 0
    if ((i & 1023) === 0) n = random.below(noise.length)
    for (let c = 0; c < 3; c++, at++) {
      n = (n + 1) & (noise.length - 1)
      const code = tables[c]![index]! + noise[n]!
      codes[at] = inverted ? 255 - code : code
    }
  }
  return { width, height, channels: 3, codes, colour: srgb8 }
}

/** Normals to walk through from random starts: quicker than drawing each. */
const noiseTable = (amount: number, random: SeededRandom): Float32Array => Float32Array.from({ length: 1 << 16 }, () => amount * random.normal())

/** Fractional 8-bit code of each channel by luminance. */
function channelTables({ hue, toneCurve }: Optics): Float32Array[] {
  const tables = [0, 1, 2].map(() => new Float32Array(tableSize))
  for (let i = 0; i < tableSize; i++) {
    const lightness = lightnessFromLuminance(i / (tableSize - 1))
    const [a, b] = hue ? hue(lightness) : [0, 0]
    transform(srgbFromXyz, xyzFromLab([lightness, a, b])).forEach((linear, c) => {
      const coded = linearToSrgb(Math.min(1, Math.max(0, linear)))
      tables[c]![i] = 255 * (toneCurve ? toneCurve(coded) : coded)
    })
  }
  return tables
}
