import type { LightPlane } from '../light-plane'
import type { Affine, Placement } from './placement'
import { cubic } from './taps'
import { encodeTones } from './tone-code'
import { reducesFrom, tonesOf, type ToneRows } from './tone-rows'

type Rotated = Extract<Placement, { kind: 'rotated' }>

/** A whole-pixel part of the stored picture, held in memory. */
interface Held<T> { left: number, top: number, width: number, height: number, values: T }

/** Straightened pixels: gathered around each wanted pixel's place. Outside the picture is paper white. */
export function rotatedRows(plane: LightPlane, placement: Rotated): ToneRows {
  if (Math.max(placement.ratioX, placement.ratioY) <= reducesFrom) return interpolated(plane, placement)
  const factor = Math.floor(Math.min(placement.ratioX, placement.ratioY) / 2)
  return factor < 2 ? averaged(plane, placement) : averaged(blockAverages(plane, factor), { ...placement, toStored: inBlocks(placement.toStored, factor) })
}

/** The stored pixels that the wanted ones reach, `beyond` more on each side. */
function reached(plane: LightPlane, { width, height, toStored: m }: Rotated, beyond: number) {
  const ends = (xx: number, xy: number, x0: number) => {
    const corners = [0, xx * (width - 1), xy * (height - 1), xx * (width - 1) + xy * (height - 1)]
    return [x0 + Math.min(...corners) - beyond, x0 + Math.max(...corners) + beyond] as const
  }
  const within = (v: number, size: number) => Math.max(0, Math.min(size - 1, v))
  const [x0, x1] = ends(m.xx, m.xy, m.x0), [y0, y1] = ends(m.yx, m.yy, m.y0)
  const left = within(Math.floor(x0), plane.width), top = within(Math.floor(y0), plane.height)
  return { left, top, width: within(Math.ceil(x1), plane.width) - left + 1, height: within(Math.ceil(y1), plane.height) - top + 1 }
}

/** Averages of whole blocks of light: far reductions gather from these. Blocks at the far edges hold what there is. */
function blockAverages(plane: LightPlane, factor: number): LightPlane {
  const width = Math.ceil(plane.width / factor)
  return {
    width, height: Math.ceil(plane.height / factor),
    read(y, x, count, row) {
      const left = x * factor, pixels = Math.min(count * factor, plane.width - left)
      const top = y * factor, bottom = Math.min(top + factor, plane.height)
      const light = new Float32Array(pixels)
      row.fill(0, 0, count)
      for (let line = top; line < bottom; line++) {
        plane.read(line, left, pixels, light)
        for (let i = 0; i < pixels; i++) row[(i / factor) | 0]! += light[i]!
      }
      for (let i = 0; i < count; i++) row[i]! /= (bottom - top) * Math.min(factor, pixels - i * factor)
    },
  }
}

const inBlocks = ({ xx, xy, x0, yx, yy, y0 }: Affine, factor: number): Affine => ({
  xx: xx / factor, xy: xy / factor, x0: (x0 + 0.5) / factor - 0.5,
  yx: yx / factor, yy: yy / factor, y0: (y0 + 0.5) / factor - 0.5,
})

function heldLight(plane: LightPlane, placement: Rotated, beyond: number): Held<Float32Array> {
  const part = reached(plane, placement, beyond)
  const values = new Float32Array(part.width * part.height)
  for (let y = 0; y < part.height; y++) plane.read(part.top + y, part.left, part.width, values.subarray(y * part.width, (y + 1) * part.width))
  return { ...part, values }
}

/** Averages light under a tent that lies square to the wanted pixels. */
function* averaged(plane: LightPlane, placement: Rotated): ToneRows {
  const { xx, xy, x0, yx, yy, y0 } = placement.toStored
  const reachX = Math.abs(xx) + Math.abs(xy), reachY = Math.abs(yx) + Math.abs(yy)
  const { left, top, width, height, values } = heldLight(plane, placement, Math.ceil(Math.max(reachX, reachY)))
  const area = xx * yy - xy * yx
  const light = new Float32Array(placement.width), codes = new Uint16Array(placement.width)
  for (let row = 0; row < placement.height; row++) {
    for (let column = 0; column < placement.width; column++) {
      const x = xx * column + xy * row + x0, y = yx * column + yy * row + y0
      let sum = 0, whole = 0
      for (let v = Math.ceil(y - reachY); v <= y + reachY; v++) {
        const isHeld = v >= top && v < top + height
        const line = (v - top) * width - left
        for (let u = Math.ceil(x - reachX); u <= x + reachX; u++) {
          const across = 1 - Math.abs(yy * (u - x) - xy * (v - y)) / Math.abs(area)
          const down = 1 - Math.abs(xx * (v - y) - yx * (u - x)) / Math.abs(area)
          if (across <= 0 || down <= 0) continue
          whole += across * down
          sum += across * down * (isHeld && u >= left && u < left + width ? values[line + u]! : 1)
        }
      }
      light[column] = sum / whole
    }
    encodeTones(light, codes)
    yield codes
  }
}

const white = 65535

/** How much of a stored pixel's width at `x` lies inside 0…size: the picture's edge is drawn smooth. */
const inside = (x: number, size: number) => Math.max(0, Math.min(1, x + 1, size - x))

/** Interpolates tones; the picture's last pixels are repeated outwards and fade to paper white over one pixel. */
function* interpolated(plane: LightPlane, placement: Rotated): ToneRows {
  const { xx, xy, x0, yx, yy, y0 } = placement.toStored
  const part = reached(plane, placement, 2)
  const tones = tonesOf(plane, part.left, part.top, part.width, part.height)
  const codes = new Uint16Array(placement.width)
  const column = new Int32Array(4), across = new Float64Array(4)
  for (let row = 0; row < placement.height; row++) {
    for (let i = 0; i < placement.width; i++) {
      const x = xx * i + xy * row + x0, y = yx * i + yy * row + y0
      const share = inside(x, plane.width) * inside(y, plane.height)
      if (share === 0) { codes[i] = white; continue }
      const left = Math.floor(x) - 1, top = Math.floor(y) - 1
      for (let k = 0; k < 4; k++) {
        column[k] = Math.max(0, Math.min(part.width - 1, left + k - part.left))
        across[k] = cubic.at(left + k - x)
      }
      let sum = 0
      for (let k = 0; k < 4; k++) {
        const line = Math.max(0, Math.min(part.height - 1, top + k - part.top)) * part.width
        sum += cubic.at(top + k - y) * (across[0]! * tones[line + column[0]!]! + across[1]! * tones[line + column[1]!]!
          + across[2]! * tones[line + column[2]!]! + across[3]! * tones[line + column[3]!]!)
      }
      const value = white + share * (sum - white)
      codes[i] = value <= 0 ? 0 : value >= white ? white : value + 0.5
    }
    yield codes
  }
}
