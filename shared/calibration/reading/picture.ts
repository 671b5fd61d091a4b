import { d50, xyzFromSrgb } from '../../tone/colour-spaces'
import type { Matrix3 } from '../../tone/matrix'
import { srgbToLinear } from '../../tone/srgb'
import { linearTable, xyzFromWorking } from '../../tone/working-space'

/** A point: x right, y down. In pictures (0, 0) is the outer corner of the first pixel, so its centre is (0.5, 0.5). */
export type Point = readonly [number, number]

/** What the codes of a picture mean. */
export interface PictureColour {
  /** Linear light 0 … 1 of each code: 256 or 65 536 values. */
  linear: Float32Array
  /** XYZ (D50, white's Y = 1) of the linear channels; a grey picture has only its white's direction. */
  xyz: Matrix3
}

/** Upright pixels of a scan or a phone picture, channels interleaved; a fourth channel is ignored. */
export interface ScanPicture {
  width: number
  height: number
  channels: 1 | 3 | 4
  codes: Uint8Array | Uint8ClampedArray | Uint16Array
  colour: PictureColour
}

const greyAxis: Matrix3 = [[d50[0], 0, 0], [d50[1], 0, 0], [d50[2], 0, 0]]

/** 8-bit sRGB (IEC 61966-2-1). */
export const srgb8: PictureColour = { linear: Float32Array.from({ length: 256 }, (_, code) => srgbToLinear(code / 255)), xyz: xyzFromSrgb }

/** 8-bit grey, coded like sRGB. */
export const grey8: PictureColour = { linear: srgb8.linear, xyz: greyAxis }

/** 16-bit channels of the working space (L*-coded). The table is made at the first call. */
export const working16 = (): PictureColour => ({ linear: linearTable(), xyz: xyzFromWorking })

/** A 16-bit L*-coded tone plane. */
export const tone16 = (): PictureColour => ({ linear: linearTable(), xyz: greyAxis })

/** The greatest code of a picture: 255 or 65 535. */
export const greatestCodeOf = (picture: ScanPicture): number => picture.colour.linear.length - 1

/**
 * The least of a pixel's colour codes: where a coloured layer on white paper has the most contrast, whatever its colour
 * (a yellow layer is dark in blue only). For finding edges, not for measuring.
 */
export function leastCode({ codes, channels }: ScanPicture, offset: number): number {
  const first = codes[offset]!
  if (channels === 1) return first
  const second = codes[offset + 1]!, third = codes[offset + 2]!
  const least = first < second ? first : second
  return least < third ? least : third
}

/** `leastCode` between pixels, bilinear; points outside take the nearest edge pixel. */
export function sampleLeastCode(picture: ScanPicture, x: number, y: number): number {
  const { width, height, channels } = picture
  const u = Math.min(Math.max(x - 0.5, 0), width - 1)
  const v = Math.min(Math.max(y - 0.5, 0), height - 1)
  const x0 = Math.floor(u), y0 = Math.floor(v)
  const x1 = Math.min(x0 + 1, width - 1), y1 = Math.min(y0 + 1, height - 1)
  const fx = u - x0, fy = v - y0
  const a = leastCode(picture, (y0 * width + x0) * channels), b = leastCode(picture, (y0 * width + x1) * channels)
  const c = leastCode(picture, (y1 * width + x0) * channels), d = leastCode(picture, (y1 * width + x1) * channels)
  return (a + (b - a) * fx) * (1 - fy) + (c + (d - c) * fx) * fy
}
