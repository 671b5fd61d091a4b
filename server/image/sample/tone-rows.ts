import type { LightPlane } from '../light-plane'
import { rotatedRows } from './rotated'
import type { Placement, Rectangle } from './placement'
import { applyTaps, averagingTaps, interpolatingTaps } from './taps'
import { encodeTones } from './tone-code'
import { isUnturned, swapsSides, turnPlane } from './turn'

/** Rows of 16-bit L*-coded tones, top first. The row is the same array each time. */
export type ToneRows = Generator<Uint16Array, void, void>

/** Nearer to one stored pixel for one wanted pixel than this counts as not reduced. */
export const reducesFrom = 1 + 1e-6

/**
 * The wanted pixels of a plane, as tones. Reducing averages light; enlarging and equal size work on the tones, so that
 * edges keep their shape to the eye. Clipping to 0…1 comes last. At equal size the pixels are the stored ones.
 */
export function toneRows(plane: LightPlane, placement: Placement): ToneRows {
  if (placement.kind === 'rotated') return rotatedRows(plane, placement)
  return Math.max(placement.ratioX, placement.ratioY) > reducesFrom ? reducedRows(plane, placement) : enlargedRows(plane, placement)
}

type Straight = Extract<Placement, { kind: 'straight' }>

/** The wanted part in the stored picture's own coordinates. */
function storedPart(plane: LightPlane, { part, turn: [a, b, c, d] }: Straight): Rectangle {
  const width = Math.abs(a) * part.width + Math.abs(b) * part.height
  const height = Math.abs(c) * part.width + Math.abs(d) * part.height
  const x = Math.abs(a) * part.x + Math.abs(b) * part.y, y = Math.abs(c) * part.x + Math.abs(d) * part.y
  return { width, height, x: a + b < 0 ? plane.width - x - width : x, y: c + d < 0 ? plane.height - y - height : y }
}

function* reducedRows(plane: LightPlane, placement: Straight): ToneRows {
  const { width, height, turn } = placement
  const [w, h] = swapsSides(turn) ? [height, width] : [width, height]
  const rows = averagedRows(plane, storedPart(plane, placement), w, h)
  const codes = new Uint16Array(w)
  if (isUnturned(turn)) {
    for (const light of rows) {
      encodeTones(light, codes)
      yield codes
    }
    return
  }
  const stored = new Uint16Array(w * h)
  let at = 0
  for (const light of rows) {
    encodeTones(light, stored, w, at)
    at += w
  }
  yield* rowsOf(turnPlane(stored, w, h, turn), width)
}

function* rowsOf(codes: Uint16Array, width: number): ToneRows {
  for (let at = 0; at < codes.length; at += width) yield codes.subarray(at, at + width)
}

/** Averages light; holds only the few wanted rows that the stored row reaches. */
function* averagedRows(plane: LightPlane, part: Rectangle, width: number, height: number): Generator<Float32Array> {
  const across = averagingTaps(part.x, part.width, width, plane.width)
  const down = averagingTaps(part.y, part.height, height, plane.height)
  const left = across.first[0]!, right = across.first[width - 1]! + across.count
  across.first.forEach((first, i) => { across.first[i] = first - left })
  const stored = new Float32Array(right - left), narrowed = new Float32Array(width)
  const pending: Float32Array[] = [], spare: Float32Array[] = []
  let done = 0, open = 0
  for (let y = down.first[0]!; done < height; y++) {
    while (open < height && down.first[open]! <= y) {
      pending.push(spare.pop()?.fill(0) ?? new Float32Array(width))
      open++
    }
    plane.read(y, left, right - left, stored)
    applyTaps(across, stored, narrowed)
    for (let row = done; row < open; row++) addWeighted(pending[row - done]!, narrowed, down.weights[row * down.count + y - down.first[row]!]!)
    while (done < open && down.first[done]! + down.count - 1 === y) {
      const finished = pending.shift()!
      yield finished
      spare.push(finished)
      done++
    }
  }
}

function addWeighted(to: Float32Array, from: Float32Array, weight: number): void {
  if (weight === 0) return
  for (let i = 0; i < to.length; i++) to[i]! += weight * from[i]!
}

/** Stored tones of a whole-pixel part of a plane. */
export function tonesOf(plane: LightPlane, x: number, y: number, width: number, height: number): Uint16Array {
  const codes = new Uint16Array(width * height)
  const light = new Float32Array(width)
  for (let row = 0; row < height; row++) {
    plane.read(y + row, x, width, light)
    encodeTones(light, codes, width, row * width)
  }
  return codes
}

/** Stored pixels that interpolation needs beyond an edge. */
const beyond = 2

function* enlargedRows(plane: LightPlane, placement: Straight): ToneRows {
  const { width, height, turn, part } = placement
  const stored = storedPart(plane, placement)
  const left = Math.max(0, Math.floor(stored.x) - beyond), right = Math.min(plane.width, Math.ceil(stored.x + stored.width) + beyond)
  const top = Math.max(0, Math.floor(stored.y) - beyond), bottom = Math.min(plane.height, Math.ceil(stored.y + stored.height) + beyond)
  let tones = tonesOf(plane, left, top, right - left, bottom - top)
  if (!isUnturned(turn)) tones = turnPlane(tones, right - left, bottom - top, turn)
  // The part's place within the turned region: the far side's distance where the turn reverses an axis.
  const [a, b, c, d] = turn
  const nearX = a + b < 0 ? right - stored.x - stored.width : stored.x - left
  const nearY = c + d < 0 ? bottom - stored.y - stored.height : stored.y - top
  const [x, y] = swapsSides(turn) ? [nearY, nearX] : [nearX, nearY]
  const [w, h] = swapsSides(turn) ? [bottom - top, right - left] : [right - left, bottom - top]
  yield* interpolatedRows(tones, w, h, { x, y, width: part.width, height: part.height }, width, height)
}

/** Interpolates tones, across first; the widened rows in use are kept. */
function* interpolatedRows(tones: Uint16Array, storedWidth: number, storedHeight: number, part: Rectangle, width: number, height: number): ToneRows {
  const across = interpolatingTaps(part.x, part.width, width, storedWidth)
  const down = interpolatingTaps(part.y, part.height, height, storedHeight)
  const kept: Float32Array[] = []
  let next = 0
  const codes = new Uint16Array(width)
  for (let row = 0; row < height; row++) {
    const first = down.first[row]!
    for (next = Math.max(next, first); next < first + down.count; next++) {
      const widened = kept.length === down.count ? kept.shift()! : new Float32Array(width)
      applyTaps(across, tones.subarray(next * storedWidth, (next + 1) * storedWidth), widened)
      kept.push(widened)
    }
    blendRows(kept, down.weights.subarray(row * down.count, (row + 1) * down.count), codes)
    yield codes
  }
}

/** Σ weight · row of at most four rows, rounded and clipped to 0…65535. */
function blendRows(rows: Float32Array[], weights: Float32Array, codes: Uint16Array): void {
  const [r0, r1 = rows[0]!, r2 = rows[0]!, r3 = rows[0]!] = rows as [Float32Array, ...Float32Array[]]
  const [w0 = 0, w1 = 0, w2 = 0, w3 = 0] = weights
  for (let i = 0; i < codes.length; i++) {
    const value = w0 * r0[i]! + w1 * r1[i]! + w2 * r2[i]! + w3 * r3[i]!
    codes[i] = value <= 0 ? 0 : value >= 65535 ? 65535 : value + 0.5
  }
}
