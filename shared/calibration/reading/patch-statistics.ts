import { lightnessFromLuminance } from '../../tone/lightness'
import type { RectMm } from '../wedge/page'
import { innerRect } from '../wedge/page'
import type { PageMap } from './page-map'
import type { Point, ScanPicture } from './picture'

/** Share of a patch's sides that is read. */
export const innerShare = 0.75
/** Distance from the median, in robust standard deviations, beyond which a pixel is dust or a hair. */
const rejectBeyond = 3.5
/** Robust standard deviation from a median absolute deviation, normal distribution: 1 / Φ⁻¹(3/4). */
const deviationFromMad = 1.4826
/** Pixels no further than this from the median are never rejected, L*. */
const neverRejectLightness = 0.5
/** Least share of the points that must lie inside the picture. */
const leastInside = 0.98
/** More points along a side than this add nothing. */
const mostAlong = 100
/** Steps of the L* histogram, and its range. */
const [binsPerLightness, greatestLightness] = [20, 130]

/** What the pixels of one patch say. */
export interface PatchStatistics {
  /** Robust centre of the pixels' L*. */
  lightness: number
  /** Robust standard deviation of the pixels' L*: texture and noise. */
  deviation: number
  /** Mean XYZ (D50, white's Y = 1) of the pixels kept. */
  xyz: [number, number, number]
  /** Pixels read, and the share of them rejected as dust, hairs or spots. */
  count: number
  rejectedShare: number
  /** Share of the pixels whose green code (the most of luminance) is at the greatest or at the least value. */
  clippedLightShare: number
  clippedDarkShare: number
}

const lightnessTable = Float32Array.from({ length: 65536 + 8192 }, (_, i) => lightnessFromLuminance(i / 65535))

/** A reader of patches with tables and buffers made once for a picture. */
export type PatchReader = (place: RectMm) => PatchStatistics | null

/**
 * Reads the inner part of a patch: pixels on a grid in the patch's own coordinates, one a pixel. The centre is the mean of the
 * pixels' L* without those further than 3.5 robust deviations from the median (Huber and Ronchetti, Robust Statistics,
 * 2nd ed., 1.4 and 5.1: median and MAD first). Null when the patch does not lie in the picture. At most `along` points a side;
 * a place (the same object) that was read before is not read again.
 */
export function patchReader(picture: ScanPicture, map: PageMap, along = mostAlong): PatchReader {
  const lightnesses = new Float32Array(along * along)
  const offsets = new Int32Array(along * along)
  const measure = lightnessMeasure(picture)
  const before = new Map<RectMm, PatchStatistics | null>()
  const read = (place: RectMm): PatchStatistics | null => {
    const { count, inside } = collect(picture, map, innerRect(place, innerShare), offsets, along)
    if (count === 0 || inside < leastInside) return null
    measure(offsets, count, lightnesses)
    return summarise(picture, lightnesses.subarray(0, count), offsets)
  }
  return (place) => {
    const known = before.get(place)
    if (known !== undefined) return known
    const statistics = read(place)
    before.set(place, statistics)
    return statistics
  }
}

/** Offsets of the pixels on a grid inside a rectangle of the page, taken as a four-cornered piece of the picture. */
function collect(picture: ScanPicture, map: PageMap, place: RectMm, offsets: Int32Array, most: number): { count: number, inside: number } {
  const { width, height, channels } = picture
  const { xMm, yMm, widthMm, heightMm } = place
  const [a, b] = [map([xMm, yMm]), map([xMm + widthMm, yMm])]
  const [c, d] = [map([xMm + widthMm, yMm + heightMm]), map([xMm, yMm + heightMm])]
  const along = Math.min(most, pointsAlong(a, b, d, c))
  const down = Math.min(most, pointsAlong(a, d, b, c))
  let count = 0
  for (let j = 0; j < down; j++) {
    const v = (j + 0.5) / down
    const x0 = a[0] + (d[0] - a[0]) * v
    const y0 = a[1] + (d[1] - a[1]) * v
    const dx = (b[0] + (c[0] - b[0]) * v - x0) / along
    const dy = (b[1] + (c[1] - b[1]) * v - y0) / along
    for (let i = 0; i < along; i++) {
      const x = Math.floor(x0 + dx * (i + 0.5))
      const y = Math.floor(y0 + dy * (i + 0.5))
      if (x >= 0 && y >= 0 && x < width && y < height) offsets[count++] = (y * width + x) * channels
    }
  }
  return { count, inside: count / (along * down) }
}

const pointsAlong = (a: Point, b: Point, c: Point, d: Point): number =>
  Math.max(1, Math.floor(Math.min(Math.hypot(b[0] - a[0], b[1] - a[1]), Math.hypot(d[0] - c[0], d[1] - c[1]))))

/** Fills `out` with the L* of the pixels at the first `count` offsets. */
function lightnessMeasure({ codes, channels, colour: { linear, xyz } }: ScanPicture): (offsets: Int32Array, count: number, out: Float32Array) => void {
  const scaled = (share: number): Float32Array => linear.map(value => value * share * 65535)
  const limit = lightnessTable.length - 1
  if (channels === 1) {
    const grey = scaled(1)
    return (offsets, count, out) => {
      for (let i = 0; i < count; i++) out[i] = lightnessTable[(grey[codes[offsets[i]!]!]! + 0.5) | 0]!
    }
  }
  const [red, green, blue] = xyz[1].map(scaled) as [Float32Array, Float32Array, Float32Array]
  return (offsets, count, out) => {
    for (let i = 0; i < count; i++) {
      const at = offsets[i]!
      const luminance = red[codes[at]!]! + green[codes[at + 1]!]! + blue[codes[at + 2]!]! + 0.5
      out[i] = lightnessTable[luminance < 0 ? 0 : luminance > limit ? limit : luminance | 0]!
    }
  }
}

function summarise(picture: ScanPicture, lightnesses: Float32Array, offsets: Int32Array): PatchStatistics {
  const median = histogramMedian(lightnesses, 0)
  const limit = Math.max(rejectBeyond * deviationFromMad * histogramMedian(lightnesses, median), neverRejectLightness)
  return gather(picture, lightnesses, offsets, median, limit)
}

/** Sums over the pixels within `limit` of the median. */
function gather({ codes, channels, colour: { linear, xyz } }: ScanPicture, lightnesses: Float32Array, offsets: Int32Array, median: number, limit: number): PatchStatistics {
  const greatest = linear.length - 1
  const g = channels === 1 ? 0 : 1
  const b = channels === 1 ? 0 : 2
  const count = lightnesses.length
  let kept = 0, sum = 0, squares = 0, red = 0, green = 0, blue = 0, light = 0, dark = 0
  for (let i = 0; i < count; i++) {
    const at = offsets[i]!
    const r1 = codes[at]!, g1 = codes[at + g]!, b1 = codes[at + b]!
    if (g1 === greatest) light++
    else if (g1 === 0) dark++
    const off = lightnesses[i]! - median
    if (off > limit || off < -limit) continue
    kept++
    sum += off
    squares += off * off
    red += linear[r1]!
    green += linear[g1]!
    blue += linear[b1]!
  }
  const shift = sum / kept
  const row = (k: 0 | 1 | 2): number => (xyz[k][0] * red + xyz[k][1] * green + xyz[k][2] * blue) / kept
  return {
    lightness: median + shift, deviation: Math.sqrt(Math.max(0, squares / kept - shift * shift)), xyz: [row(0), row(1), row(2)],
    count, rejectedShare: 1 - kept / count, clippedLightShare: light / count, clippedDarkShare: dark / count,
  }
}

/** Median of |value − centre| with centre 0 for the median itself, to 1/20 L*, by counting. */
function histogramMedian(values: Float32Array, centre: number): number {
  const last = binsPerLightness * greatestLightness
  const bins = new Uint32Array(last + 1)
  for (let i = 0; i < values.length; i++) {
    const bin = Math.abs(values[i]! - centre) * binsPerLightness
    bins[bin > last ? last : bin | 0]!++
  }
  let [seen, bin] = [0, 0]
  while (bin < bins.length - 1 && seen + bins[bin]! < values.length / 2) seen += bins[bin++]!
  return (bin + (values.length / 2 - seen) / Math.max(1, bins[bin]!)) / binsPerLightness
}
