import { ComputeError } from '../errors'
import { lightnessFromDensity } from './density'
import { dimColour } from './dim'
import { requireNumber } from './domain'
import { xyzFromLab } from './lab'
import type { LabPoint, Look } from './looks'
import { lookPaths } from './looks'
import { pchip } from '../calibration/pchip'
import { srgbFromXyz } from './colour-spaces'
import { transform } from './matrix'
import { interpolateAll } from './response'
import { linearToSrgb } from './srgb'
import { greatestCode } from './working-space'

/**
 * A look by name; `dim` shows any lightness in amber for the dim room: its blue is 0; or a bench's own colours, L*a*b* (D50)
 * points in any order of L*, whose ends' a* and b* hold beyond them.
 */
export type PaletteKind = Look | 'dim' | readonly LabPoint[]

/** An sRGB colour, 8 bits a channel. */
export type Rgb8 = readonly [number, number, number]

/** Colours made for each path; 4096 steps of L*, so a picked colour is within 0.013 L* before rounding to 8 bits. */
const pathSteps = 4096
const paths = new Map<string, Uint32Array>()
/** Looks by name, and a few benches' own paths: the oldest gives way. */
const pathsKept = 24

/**
 * The colour (8-bit sRGB) in which a look shows a lightness L* (clamped to 0 … 100). Its L* is the one asked for, within
 * the rounding to 8 bits; chroma is taken back where sRGB cannot show it. `dim` keeps the order of lightnesses only.
 */
export function lookColour(kind: PaletteKind, lightness: number): Rgb8 {
  return colours(kind)(Math.min(100, Math.max(0, lightness)))
}

function colours(kind: PaletteKind): (lightness: number) => Rgb8 {
  if (kind === 'dim') return dimColour
  const along = pathColour(typeof kind === 'string' ? lookPaths[kind] : kind)
  return lightness => colourWithin(along(lightness))
}

/**
 * Canvas pixels (little-endian RGBA, opaque) for each of the 65 536 tone codes, from a table of lightness by tone code.
 * For `film` give the light table's lightness (`lightTableLightness` of the ink levels), for prints the forecast's.
 * @throws ComputeError `invalid_input` unless the table has 65 536 entries.
 */
export function buildPaletteTable(kind: PaletteKind, lightnessTable: ArrayLike<number>): Uint32Array {
  if (lightnessTable.length !== greatestCode + 1) throw new ComputeError('invalid_input', 'A lightness table has 65536 entries.')
  const path = pathPixels(kind)
  const pixels = new Uint32Array(greatestCode + 1)
  for (let code = 0; code <= greatestCode; code++)
    pixels[code] = path[Math.round(Math.min(100, Math.max(0, lightnessTable[code]!)) * (pathSteps / 100))]!
  return pixels
}

/** Visual densities of film on the light table: clear base, and what full ink adds. Assumed look, not measured. */
const clearFilmDensity = 0.06
const fullInkDensity = 1.9

/**
 * Lightness L* at which film with this ink level (0 … 1) shows on a light table: visual density linear in the level.
 * It is a look only; what the film holds back of UV is another matter.
 * @throws ComputeError `invalid_input` outside 0 … 1.
 */
export function lightTableLightness(level: number): number {
  return lightnessFromDensity(clearFilmDensity + fullInkDensity * requireNumber(level, 'An ink level', 0, 1))
}

/** Steps between which `lightTableLightnesses` draws straight lines: within 0.0001 L*. */
const lightTableSteps = 4096
let lightTable: Float64Array | undefined

/** `lightTableLightness` of many levels 0 … 1, which are not checked; for whole tables. */
export function lightTableLightnesses(levels: ArrayLike<number>): Float64Array {
  lightTable ??= Float64Array.from({ length: lightTableSteps + 1 }, (_, i) => lightTableLightness(i / lightTableSteps))
  return interpolateAll(lightTable, levels)
}

function pathPixels(kind: PaletteKind): Uint32Array {
  const name = typeof kind === 'string' ? kind : JSON.stringify(kind)
  const known = paths.get(name)
  if (known) return known
  if (paths.size >= pathsKept) paths.delete(paths.keys().next().value!)
  const colourAt = colours(kind)
  const pixels = Uint32Array.from({ length: pathSteps + 1 }, (_, i) => pixelOf(colourAt(100 * i / pathSteps)))
  paths.set(name, pixels)
  return pixels
}

const pixelOf = ([red, green, blue]: Rgb8): number => ((255 << 24) | (blue << 16) | (green << 8) | red) >>> 0

/** Points of a path nearer than this in L* are one point, as on a scanned print's plateaus in white and black. */
const apart = 0.1

function pathColour(given: readonly LabPoint[]): (lightness: number) => LabPoint {
  const path = [...given].sort((p, q) => p[0] - q[0]).reduce<LabPoint[]>((kept, point) => kept.length > 0 && point[0] - kept.at(-1)![0] < apart ? kept : [...kept, point], [])
  const lightnesses = path.map(point => point[0])
  const a = pchip(lightnesses, path.map(point => point[1]))
  const b = pchip(lightnesses, path.map(point => point[2]))
  return l => [l, a(l), b(l)]
}

/** Halvings of the chroma's share; the last is far below one 8-bit step. */
const halvings = 12

function colourWithin([l, a, b]: LabPoint): Rgb8 {
  let [share, step] = [1, 0.5]
  let linear = linearSrgb([l, a, b])
  if (!isShown(linear)) {
    share = 0
    linear = linearSrgb([l, 0, 0])
    for (let i = 0; i < halvings; i++, step /= 2) {
      const more = linearSrgb([l, (share + step) * a, (share + step) * b])
      if (isShown(more)) [share, linear] = [share + step, more]
    }
  }
  const code = (value: number): number => Math.round(255 * linearToSrgb(Math.min(1, Math.max(0, value))))
  return [code(linear[0]), code(linear[1]), code(linear[2])]
}

const linearSrgb = (lab: LabPoint) => transform(srgbFromXyz, xyzFromLab(lab))
const isShown = (linear: readonly number[]): boolean => linear.every(v => v >= -1e-4 && v <= 1.0001)
