import type { ScanPicture } from './picture'
import { greatestCodeOf } from './picture'

/** A small grey copy of a picture, for finding markers: 8-bit means of each pixel's least code. */
export interface FindingPlane {
  width: number
  height: number
  /** Pixels of the picture along one pixel of the plane. */
  factor: number
  values: Uint8Array
}

/** Above this reduction every second row and column is enough for the mean. */
const denseFactor = 4

/**
 * The picture reduced by a whole factor so that its longer side comes near `longSide` pixels (never enlarged). Rows and
 * columns that do not fill a last box are left out.
 */
export function findingPlane(picture: ScanPicture, longSide: number): FindingPlane {
  const factor = Math.max(1, Math.round(Math.max(picture.width, picture.height) / longSide))
  const [width, height] = [Math.floor(picture.width / factor), Math.floor(picture.height / factor)]
  const values = new Uint8Array(width * height)
  const step = factor >= denseFactor ? 2 : 1
  const perBox = Math.ceil(factor / step)
  const scale = 255 / greatestCodeOf(picture) / (perBox * perBox)
  const sums = new Float64Array(width)
  for (let y = 0; y < height; y++) {
    sums.fill(0)
    for (let dy = 0; dy < factor; dy += step) addRow(picture, y * factor + dy, factor, step, sums)
    for (let x = 0; x < width; x++) values[y * width + x] = sums[x]! * scale + 0.5
  }
  return { width, height, factor, values }
}

function addRow({ codes, channels, width }: ScanPicture, y: number, factor: number, step: number, sums: Float64Array): void {
  const stride = step * channels
  const reach = factor * channels
  let offset = y * width * channels
  for (let x = 0; x < sums.length; x++, offset += reach) {
    let sum = 0
    if (channels === 1) for (let at = offset; at < offset + reach; at += stride) sum += codes[at]!
    else {
      for (let at = offset; at < offset + reach; at += stride) {
        const r = codes[at]!, g = codes[at + 1]!, b = codes[at + 2]!
        sum += r < g ? (r < b ? r : b) : (g < b ? g : b)
      }
    }
    sums[x]! += sum
  }
}

/** The same plane with light and dark exchanged, for inverted scans. */
export const invertedPlane = (plane: FindingPlane): FindingPlane => ({ ...plane, values: plane.values.map(value => 255 - value) })

/** A value between the plane's pixels, bilinear, 0 … 255; outside the nearest edge pixel's. */
export function samplePlane({ width, height, values }: FindingPlane, x: number, y: number): number {
  const u = Math.min(Math.max(x - 0.5, 0), width - 1.001)
  const v = Math.min(Math.max(y - 0.5, 0), height - 1.001)
  const x0 = u | 0, y0 = v | 0
  const fx = u - x0, fy = v - y0
  const at = y0 * width + x0
  const upper = values[at]! + (values[at + 1]! - values[at]!) * fx
  const lower = values[at + width]! + (values[at + width + 1]! - values[at + width]!) * fx
  return upper + (lower - upper) * fy
}
