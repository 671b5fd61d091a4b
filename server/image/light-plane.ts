import type { Vector3 } from '#shared/tone/matrix'
import { lightTables } from './colour/working-light'
import { greatestOf } from './decode/codes'
import type { StoredPicture } from './decode/decode'

/** One channel of linear light, read row by row from a decoded picture. Values may lie outside 0…1. */
export interface LightPlane {
  width: number
  height: number
  /** fills `row[0 … count)` with the pixels from column `x` of line `y` */
  read(y: number, x: number, count: number, row: Float32Array): void
}

/** The plane Σ weight_i · working channel i, with transparency over white. */
export function lightPlane(picture: StoredPicture, weights: Vector3): LightPlane {
  const { codes, channels, width, height } = picture
  const tables = lightTables(picture.light, weights, greatestOf(codes))
  const colours = tables.length === 1 ? readGrey(codes, channels, width, tables[0]!) : readColour(codes, channels, width, tables)
  const read = channels % 2 === 0 ? overWhite(colours, codes, channels, width, tables) : colours
  return { width, height, read }
}

type ReadRow = LightPlane['read']

const readGrey = (codes: Uint8Array | Uint16Array, channels: number, width: number, table: Float32Array): ReadRow =>
  (y, x, count, row) => {
    for (let i = 0, at = (y * width + x) * channels; i < count; i++, at += channels) row[i] = table[codes[at]!]!
  }

const readColour = (codes: Uint8Array | Uint16Array, channels: number, width: number, [red, green, blue]: Float32Array[]): ReadRow =>
  (y, x, count, row) => {
    for (let i = 0, at = (y * width + x) * channels; i < count; i++, at += channels) {
      row[i] = red![codes[at]!]! + green![codes[at + 1]!]! + blue![codes[at + 2]!]!
    }
  }

function overWhite(read: ReadRow, codes: Uint8Array | Uint16Array, channels: number, width: number, tables: Float32Array[]): ReadRow {
  const greatest = tables[0]!.length - 1
  const white = tables.reduce((sum, table) => sum + table[greatest]!, 0)
  return (y, x, count, row) => {
    read(y, x, count, row)
    for (let i = 0, at = (y * width + x + 1) * channels - 1; i < count; i++, at += channels) {
      row[i] = white + (row[i]! - white) * (codes[at]! / greatest)
    }
  }
}
