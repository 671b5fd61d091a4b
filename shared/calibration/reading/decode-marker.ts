import { isInkModule, markerCodes, markerModules, patternModules, turnedPattern } from '../wedge/marker-codes'
import type { Homography } from './homography'
import { applyHomography, fitHomography } from './homography'
import type { Point } from './picture'
import type { Quadrilateral } from './quadrilateral'

/** A marker recognised in a picture. `corners` are those of its page rectangle: top-left, top-right, bottom-right, bottom-left of the print. */
export interface SeenMarker { id: number, corners: Quadrilateral, mirrored: boolean }

/** Reads a picture's value between pixels. */
export type Sampler = (x: number, y: number) => number

const unitSquare: readonly Point[] = [[0, 0], [1, 0], [1, 1], [0, 1]]
/** Modules outside the frame's edge where the film must be clear. */
const outsideModules = 0.5
/** Share of the frame's or the surroundings' samples that dust or a neighbour may spoil. */
const spoiledShare = 0.15

/** Pattern → 8 · id + turn for every pattern at most one module from a marker's in one of its eight ways to lie; −1 elsewhere. */
const placesByPattern = allPatterns()

function allPatterns(): Int16Array {
  const table = new Int16Array(1 << (patternModules * patternModules)).fill(-1)
  markerCodes.forEach((code, id) => {
    for (let k = 0; k < 8; k++) {
      const pattern = turnedPattern(code, k)
      table[pattern] = 8 * id + k
      for (let bit = 0; bit < patternModules ** 2; bit++) table[pattern ^ (1 << bit)] = 8 * id + k
    }
  })
  return table
}

/**
 * The marker that stands in a quadrilateral (clockwise corners), or null when there is none: a light frame, dark around it,
 * and a pattern at most one module from a known one. `leastContrast` is in the sampler's unit.
 */
export function decodeMarker(sample: Sampler, quadrilateral: Quadrilateral, leastContrast: number): SeenMarker | null {
  const toPicture = fitHomography(unitSquare, quadrilateral)
  const threshold = frameThreshold(sample, toPicture, leastContrast)
  if (threshold === null) return null
  let pattern = 0
  for (let row = 0; row < patternModules; row++) {
    for (let column = 0; column < patternModules; column++) {
      const value = moduleValue(sample, toPicture, row + 1, column + 1)
      if (value > threshold) pattern |= 1 << (patternModules * row + column)
    }
  }
  const place = placesByPattern[pattern]!
  return place < 0 ? null : upright(place >> 3, place & 7, toPicture)
}

/** Half way between frame and surroundings, or null when they are not light on dark all around. */
function frameThreshold(sample: Sampler, toPicture: Homography, leastContrast: number): number | null {
  const [frame, around] = [[] as number[], [] as number[]]
  for (let i = 0; i < markerModules; i++) {
    const last = markerModules - 1
    for (const [row, column] of [[0, i], [last, i], [i, 0], [i, last]] as const) frame.push(moduleValue(sample, toPicture, row, column))
    const [middle, out] = [(i + 0.5) / markerModules, outsideModules / markerModules]
    for (const point of [[middle, -out], [middle, 1 + out], [-out, middle], [1 + out, middle]] as const) around.push(sampleAt(sample, toPicture, point))
  }
  const [light, dark] = [median(frame), median(around)]
  if (light - dark < leastContrast) return null
  const threshold = (light + dark) / 2
  const spoiled = frame.filter(value => value < threshold).length + around.filter(value => value > threshold).length
  return spoiled > spoiledShare * (frame.length + around.length) ? null : threshold
}

const sampleAt = (sample: Sampler, toPicture: Homography, point: Point): number => sample(...applyHomography(toPicture, point))

/** A module's value: the mean of five points in its inner half. */
function moduleValue(sample: Sampler, toPicture: Homography, row: number, column: number): number {
  const [u, v, d] = [(column + 0.5) / markerModules, (row + 0.5) / markerModules, 0.2 / markerModules]
  return (sampleAt(sample, toPicture, [u, v]) + sampleAt(sample, toPicture, [u - d, v - d]) + sampleAt(sample, toPicture, [u + d, v - d])
    + sampleAt(sample, toPicture, [u - d, v + d]) + sampleAt(sample, toPicture, [u + d, v + d])) / 5
}

/** Puts the corners into the print's order, undoing `turnedPattern(code, k)` on points of the unit square. */
function upright(id: number, k: number, toPicture: Homography): SeenMarker {
  const asSeen = ([u, v]: Point): Point => {
    let [x, y] = [k & 4 ? 1 - u : u, v]
    for (let turn = 0; turn < (k & 3); turn++) [x, y] = [1 - y, x]
    return [x, y]
  }
  const corners = unitSquare.map(corner => applyHomography(toPicture, asSeen(corner)))
  return { id, corners: corners as unknown as Quadrilateral, mirrored: (k & 4) !== 0 }
}

const median = (values: number[]): number => [...values].sort((a, b) => a - b)[values.length >> 1]!

/**
 * Share (0 … 1) of a marker's 36 modules that look as they should at the given corners (in the print's order); 0 where
 * frame and surroundings do not differ. For confirming a marker at a predicted place.
 */
export function moduleAgreement(sample: Sampler, id: number, corners: Quadrilateral, leastContrast: number): number {
  const toPicture = fitHomography(unitSquare, corners)
  const threshold = frameThreshold(sample, toPicture, leastContrast)
  if (threshold === null) return 0
  let right = 0
  for (let row = 0; row < markerModules; row++) {
    for (let column = 0; column < markerModules; column++) {
      if ((moduleValue(sample, toPicture, row, column) > threshold) === isInkModule(markerCodes[id]!, row, column)) right++
    }
  }
  return right / markerModules ** 2
}
