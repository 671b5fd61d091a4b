import sharp from 'sharp'
import type { SeededRandom } from '../../shared/calibration/random'
import type { LevelRaster } from '../../shared/calibration/wedge/paint'
import { luminanceFromLightness } from '../../shared/tone/lightness'
import { linearToSrgb } from '../../shared/tone/srgb'
import type { PrintModel } from './scan-simulator/print'
import type { PrintedBench } from './simulator/system'

/** A film file's ink levels, 0 clear … 1 full ink, by rows as the print reads: the file is mirrored. */
export interface FilmLevels { width: number, height: number, levels: Float64Array }

/** Decodes a grey film file of 8 or 16 bits (PNG or TIFF) made with black ink; black is full ink. */
export async function filmLevels(file: Uint8Array): Promise<FilmLevels> {
  const { data, info } = await sharp(file).flop().toColourspace('grey16').raw({ depth: 'ushort' }).toBuffer({ resolveWithObject: true })
  const codes = new Uint16Array(data.buffer, data.byteOffset, data.byteLength / 2)
  const levels = Float64Array.from({ length: info.width * info.height }, (_, i) => 1 - codes[i * info.channels]! / 65535)
  return { width: info.width, height: info.height, levels }
}

/** A wedge's levels are codes of 8 bits, so nothing is lost. */
export const rasterOf = ({ width, height, levels }: FilmLevels, pixelsPerInch: number): LevelRaster =>
  ({ widthPx: width, heightPx: height, pixelsPerInch, codes: Uint8Array.from(levels, level => Math.round(255 * level)) })

export const rampSteps = 256
const stepPx = 4
export const rampPx = { width: rampSteps * stepPx, height: 256 }

/** A photo of 256 even steps of L* 0 … 100 from left to right, 16-bit grey in sRGB. */
export async function rampPhoto(random: SeededRandom): Promise<Buffer> {
  const codes = Array.from({ length: rampSteps }, (_, i) => Math.round(65535 * linearToSrgb(luminanceFromLightness(100 * i / (rampSteps - 1)))))
  const pixels = Uint16Array.from({ length: rampPx.width * rampPx.height }, (_, at) => codes[Math.floor(at % rampPx.width / stepPx)]!)
  // One pixel in the last row makes each photo another file.
  pixels[pixels.length - 1] = Math.floor(65536 * random.uniform())
  return sharp(pixels, { raw: { width: rampPx.width, height: rampPx.height, channels: 1 } }).toColourspace('grey16').png().toBuffer()
}

/** The ink level of each step of the ramp, from the middle of the film. */
export function rampLevels({ width, height, levels }: FilmLevels): number[] {
  const row = height >> 1
  return Array.from({ length: rampSteps }, (_, i) => levels[row * width + Math.floor((i + 0.5) * width / rampSteps)]!)
}

/** Change of L* per unit of log₁₀ exposure that the scan simulator's light makes in the middle tones. */
const lightnessPerLogExposure = 60

/**
 * A typical print of a bench for the scan simulator. Its light falls off from the middle; the print is exposed so that the
 * mean of the light over the wedge is the base exposure's, as for every other print of the bench.
 */
export function typicalPrint(bench: PrintedBench, seed: number): PrintModel {
  const fallOffShare = 0.1
  const meanLoss = meanLogLoss(fallOffShare)
  const [black, white] = [bench.lightness(0), bench.lightness(1)]
  const lightnessOf = (level: number): number => {
    const lightness = bench.lightness(level)
    const tone = (lightness - black) / (white - black)
    return lightness - 4 * tone * (1 - tone) * lightnessPerLogExposure * meanLoss
  }
  return { lightnessOf, seed, gradientLightness: 2, mottleLightness: 1, textureLightness: 3, fallOffShare }
}

/** Mean of −log₁₀(1 − share · 2r²) over the middle 84 % of a film's sides, where the cells stand; r counts from its middle, sides being 1. */
function meanLogLoss(share: number): number {
  const places = Array.from({ length: 41 }, (_, i) => 0.42 * (i - 20) / 20)
  const losses = places.flatMap(x => places.map(y => -Math.log10(1 - share * 2 * (x * x + y * y))))
  return losses.reduce((a, b) => a + b, 0) / losses.length
}
