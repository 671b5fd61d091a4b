import { execFile } from 'node:child_process'
import { rm } from 'node:fs/promises'
import { promisify } from 'node:util'
import { mixWeights, neutralMix } from '../../../shared/tone/mix'
import { decodePicture } from '../../../server/image/decode/decode'
import { lightPlane } from '../../../server/image/light-plane'
import { placePixels } from '../../../server/image/sample/placement'
import { toneRows } from '../../../server/image/sample/tone-rows'
import { turnedSides, turnOf } from '../../../server/image/sample/turn'

const run = promisify(execFile)
const wholePicture = { quarterTurns: 0, straightenDegrees: 0, crop: { x: 0, y: 0, width: 1, height: 1 } }

/** L* of every upright pixel, row by row. */
export interface LightnessPlane { width: number, height: number, lightness: Float64Array }

/** As the engine reads a file: its own pixels, upright, over white. */
export async function engineLightness(path: string): Promise<LightnessPlane> {
  const picture = await decodePicture({ path })
  const { orientation } = picture.header
  const { width, height } = turnedSides(turnOf(orientation, 0), picture.width, picture.height)
  const lightness = new Float64Array(width * height)
  let at = 0
  for (const row of toneRows(lightPlane(picture, mixWeights(neutralMix)), placePixels({ ...picture, orientation }, wholePicture, width, height))) {
    for (const code of row) lightness[at++] = code / 655.35
  }
  return { width, height, lightness }
}

/** Debian's icc-profiles-free. */
export const icc = { srgb: '/usr/share/color/icc/sRGB.icc', lab: '/usr/share/color/icc/LCMSLABI.ICM', adobe: '/usr/share/color/icc/compatibleWithAdobeRGB1998.icc' }

/**
 * As ImageMagick reads it, with its own decoders and lcms: by the embedded profile, or by the one that is given (sRGB) where
 * there is none. Transparency is laid over white in linear light here, by IEC 61966-2-1 for pictures that are sRGB.
 */
export async function magickLightness(path: string, assumed: string = icc.srgb): Promise<LightnessPlane> {
  const first = `${path}[0]`
  const { stdout: facts } = await run('convert', ['-quiet', first, '-auto-orient', '-format', '%w|%h|%[profile:icc]|%[colorspace]|%[opaque]', 'info:'])
  const [width, height, profile, colourSpace, opaque] = facts.split('|') as [string, string, string, string, string]
  const sides = { width: Number(width), height: Number(height) }
  if (/false/i.test(opaque)) return { ...sides, lightness: overWhite(await samples([first, '-auto-orient', '-colorspace', 'sRGB', '-depth', '16', '-endian', 'LSB', 'rgba:-'])) }
  // A grey picture without a profile has sRGB's curve; one that says so is linear.
  const assign = profile ? [] : [...colourSpace !== 'sRGB' ? ['-colorspace', 'sRGB', '-type', 'TrueColor'] : [], '-profile', assumed]
  const codes = await samples([first, '-auto-orient', '-alpha', 'off', ...assign, '-profile', icc.lab, '-channel', 'R', '-separate', '-depth', '16', '-endian', 'LSB', 'gray:-'])
  return { ...sides, lightness: Float64Array.from(codes, code => code / 655.35) }
}

async function samples(options: string[]): Promise<Uint16Array> {
  const { stdout } = await run('convert', ['-quiet', ...options], { maxBuffer: 1 << 30, encoding: 'buffer' })
  return new Uint16Array(stdout.buffer.slice(stdout.byteOffset, stdout.byteOffset + stdout.length))
}

const linear = (v: number) => v <= 0.04045 ? v / 12.92 : ((v + 0.055) / 1.055) ** 2.4
/** CIE 15:2004, 8.2.1.1. */
const lightnessOf = (y: number) => y > 216 / 24389 ? 116 * Math.cbrt(y) - 16 : y * 24389 / 27
/** Luminance of sRGB's primaries adapted to D50 by Bradford, as ICC profiles have it (rounded to four places). */
const luminance = [0.2225, 0.7169, 0.0606] as const

const overWhite = (rgba: Uint16Array): Float64Array => Float64Array.from({ length: rgba.length / 4 }, (_, i) => {
  const y = luminance.reduce((sum, share, c) => sum + share * linear(rgba[4 * i + c]! / 65535), 0)
  return lightnessOf(1 + (y - 1) * rgba[4 * i + 3]! / 65535)
})

/** HEIC and AVIF through heif-convert (libheif with the decoders of the system), then as above. */
export async function heifConvertLightness(path: string, assumed?: string): Promise<LightnessPlane> {
  const png = `${path}.decoded.png`
  await run('heif-convert', [path, png])
  try {
    return await magickLightness(png, assumed)
  }
  finally {
    await rm(png, { force: true })
  }
}

/** Greatest and mean difference in L*; infinite where the sides differ. */
export function difference(a: LightnessPlane, b: LightnessPlane): { max: number, mean: number } {
  if (a.width !== b.width || a.height !== b.height || a.lightness.length !== b.lightness.length) return { max: Infinity, mean: Infinity }
  let max = 0, sum = 0
  a.lightness.forEach((value, i) => {
    const off = Math.abs(value - b.lightness[i]!)
    max = Math.max(max, off)
    sum += off
  })
  return { max, mean: sum / a.lightness.length }
}
