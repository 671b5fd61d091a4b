import type { Geometry } from '../protocol'
import { type Turn, turnedSides, turnOf } from './turn'

export interface Rectangle { x: number, y: number, width: number, height: number }

/** Where the wanted pixels lie in the stored picture. */
export type Placement = { width: number, height: number, turn: Turn, /** stored pixels for one wanted pixel, per axis of the result */ ratioX: number, ratioY: number } & (
  | { kind: 'straight', /** in the turned picture's pixels */ part: Rectangle }
  | { kind: 'rotated', /** centre of the wanted pixel (column, row) in stored pixels */ toStored: Affine }
)

/** `x' = xx·x + xy·y + x0`, `y' = yx·x + yy·y + y0`. */
export interface Affine { xx: number, xy: number, x0: number, yx: number, yy: number, y0: number }

/** An edge this near to a pixel's border lies on it: fractions of a side cannot say it better. */
const snapPixels = 1e-3
const snap = (v: number) => Math.abs(v - Math.round(v)) < snapPixels ? Math.round(v) : v

/** Bounding rectangle of a picture turned by an angle. */
export function frameSides(width: number, height: number, degrees: number) {
  const angle = Math.abs(degrees) * Math.PI / 180
  return { width: width * Math.cos(angle) + height * Math.sin(angle), height: width * Math.sin(angle) + height * Math.cos(angle) }
}

/** The wanted part's sides in pixels of the turned, straightened picture. */
export function partSides(picture: { width: number, height: number, orientation: number }, geometry: Geometry) {
  const turned = turnedSides(turnOf(picture.orientation, geometry.quarterTurns), picture.width, picture.height)
  const frame = frameSides(turned.width, turned.height, geometry.straightenDegrees)
  return { width: frame.width * geometry.crop.width, height: frame.height * geometry.crop.height }
}

/**
 * Places `width` × `height` wanted pixels on a stored picture: crop in fractions of the straightened picture's bounding
 * rectangle, turned clockwise by `straightenDegrees` about its centre, after quarter turns, after orientation.
 */
export function placePixels(picture: { width: number, height: number, orientation: number }, geometry: Geometry, width: number, height: number): Placement {
  const turn = turnOf(picture.orientation, geometry.quarterTurns)
  const turned = turnedSides(turn, picture.width, picture.height)
  const frame = frameSides(turned.width, turned.height, geometry.straightenDegrees)
  const { crop } = geometry
  const left = crop.x * frame.width, top = crop.y * frame.height
  const right = left + crop.width * frame.width, bottom = top + crop.height * frame.height
  if (geometry.straightenDegrees === 0) {
    const x = snap(left), y = snap(top)
    const part = { x, y, width: snap(right) - x, height: snap(bottom) - y }
    return { kind: 'straight', width, height, turn, part, ratioX: part.width / width, ratioY: part.height / height }
  }
  const angle = geometry.straightenDegrees * Math.PI / 180
  const cos = Math.cos(angle), sin = Math.sin(angle)
  const ratioX = (right - left) / width, ratioY = (bottom - top) / height
  // Against the clockwise turn back to the turned picture, then the turn to the stored one; all about the centres.
  const [a, b, c, d] = turn
  const ux = { x: cos * ratioX, y: -sin * ratioX }, uy = { x: sin * ratioY, y: cos * ratioY }
  const fromX = left + ratioX / 2 - frame.width / 2, fromY = top + ratioY / 2 - frame.height / 2
  const startX = cos * fromX + sin * fromY, startY = -sin * fromX + cos * fromY
  return {
    kind: 'rotated', width, height, turn, ratioX, ratioY,
    toStored: {
      xx: a * ux.x + b * ux.y, xy: a * uy.x + b * uy.y, x0: a * startX + b * startY + picture.width / 2 - 0.5,
      yx: c * ux.x + d * ux.y, yy: c * uy.x + d * uy.y, y0: c * startX + d * startY + picture.height / 2 - 0.5,
    },
  }
}
