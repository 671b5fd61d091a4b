import type { Codes } from '../decode/codes'

/**
 * One of the eight ways a picture can lie: a signed permutation that takes a direction in the turned picture to the
 * direction in the stored one, `[x, y] stored = [[a, b], [c, d]] · [x, y] turned`, y down.
 */
export type Turn = readonly [a: number, b: number, c: number, d: number]

export const unturned: Turn = [1, 0, 0, 1]
const clockwise: Turn = [0, 1, -1, 0]

/** Exif 2.32, tag 274: where the stored first row and column lie in the upright picture. */
const orientations: readonly Turn[] = [
  unturned, [-1, 0, 0, 1], [-1, 0, 0, -1], [1, 0, 0, -1], [0, 1, 1, 0], clockwise, [0, -1, -1, 0], [0, -1, 1, 0],
]

const after = ([a, b, c, d]: Turn, [e, f, g, h]: Turn): Turn => [a * e + b * g, a * f + b * h, c * e + d * g, c * f + d * h]

/** From a stored picture to the upright one, then turned clockwise by quarters. */
export function turnOf(orientation: number, quarterTurns: number): Turn {
  let turn = orientations[orientation - 1] ?? unturned
  for (let i = 0; i < quarterTurns % 4; i++) turn = after(turn, clockwise)
  return turn
}

export const swapsSides = (turn: Turn): boolean => turn[0] === 0
export const isUnturned = (turn: Turn): boolean => turn[0] === 1 && turn[3] === 1

/** Sides of the turned picture. */
export const turnedSides = (turn: Turn, width: number, height: number) =>
  swapsSides(turn) ? { width: height, height: width } : { width, height }

/** Block side: both planes' parts stay in the nearest cache. */
const block = 64

/** The picture of `width` × `height` stored codes, turned. */
export function turnPlane(stored: Uint16Array, width: number, height: number, turn: Turn): Uint16Array {
  const [a, b, c, d] = turn
  const sides = turnedSides(turn, width, height)
  const stepX = a + c * width, stepY = b + d * width
  const start = (a + b < 0 ? width - 1 : 0) + (c + d < 0 ? (height - 1) * width : 0)
  const turned = new Uint16Array(stored.length)
  for (let top = 0; top < sides.height; top += block) {
    const bottom = Math.min(top + block, sides.height)
    for (let left = 0; left < sides.width; left += block) {
      const right = Math.min(left + block, sides.width)
      for (let y = top; y < bottom; y++) {
        let from = start + y * stepY + left * stepX
        for (let to = y * sides.width + left; to < y * sides.width + right; to++, from += stepX) turned[to] = stored[from]!
      }
    }
  }
  return turned
}

/** An interleaved picture, turned; the same one where nothing is to be done. */
export function turnCodes(picture: Codes, turn: Turn): Codes {
  if (isUnturned(turn)) return picture
  const { width, height, channels, codes } = picture
  const [a, b, c, d] = turn
  const sides = turnedSides(turn, width, height)
  const stepX = channels * (a + c * width), stepY = channels * (b + d * width)
  const start = channels * ((a + b < 0 ? width - 1 : 0) + (c + d < 0 ? (height - 1) * width : 0))
  const turned = new (codes instanceof Uint16Array ? Uint16Array : Uint8Array)(codes.length)
  let to = 0
  for (let y = 0; y < sides.height; y++) {
    for (let x = 0, from = start + y * stepY; x < sides.width; x++, from += stepX) {
      for (let channel = 0; channel < channels; channel++) turned[to++] = codes[from + channel]!
    }
  }
  return { ...sides, channels, codes: turned }
}
