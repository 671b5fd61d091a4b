import sharp, { type Sharp } from 'sharp'
import type { Vector3 } from '#shared/tone/matrix'
import { readProfile } from './colour/icc-profile'
import { displayP3Light, lightTables, srgbGreyLight, srgbLight, type WorkingLight, workingLightOf } from './colour/working-light'
import { requireWithinBudget } from './header/budget'
import { type PictureHeader, unreadable } from './header/header'
import { readPictureHeader } from './header/read-header'

sharp.cache(false)
sharp.concurrency(Number(process.env.IMAGE_THREADS ?? 2))

/** A decoded picture as it is stored: not yet turned upright, its codes untouched, interleaved. */
export interface StoredPicture {
  header: PictureHeader
  width: number
  height: number
  codes: Uint8Array | Uint16Array
  channels: number
  light: WorkingLight
}

/** How the stored codes become light, and whether the library has to convert them first. */
export function colourOf(header: PictureHeader): { light: WorkingLight, converted: boolean } {
  const profile = header.icc && readProfile(header.icc)
  if (header.colour === 'cmyk' || (profile?.kind === 'other' && header.colour === 'rgb')) return { light: displayP3Light, converted: true }
  if (profile && profile.kind === header.colour) return { light: workingLightOf(profile), converted: false }
  return { light: header.colour === 'grey' ? srgbGreyLight : srgbLight, converted: false }
}

/** Options for every reading of an upload: the pixel budget is ours, cut-off and broken data are errors. */
export const inputOptions = { failOn: 'error', limitInputPixels: false, sequentialRead: true } as const

function asStored(path: string, header: PictureHeader) {
  const picture = sharp(path, { ...inputOptions, ignoreIcc: true })
  if (header.bitDepth === 16) return picture.toColourspace(header.colour === 'grey' ? 'grey16' : 'rgb16').raw({ depth: 'ushort' })
  return picture.toColourspace(header.colour === 'grey' && !header.alpha ? 'b-w' : 'srgb').raw()
}

export const asDisplayP3 = (path: string): Sharp => sharp(path, inputOptions).toColourspace('rgb16').withIccProfile('p3').raw({ depth: 'ushort' })

/** Runs the decoder; what it can't read is the picture's fault and said so. */
export async function orUnreadable<T>(decoding: Promise<T>): Promise<T> {
  try {
    return await decoding
  }
  catch (error) {
    if (error instanceof Error && /memory|alloc/i.test(error.message)) throw error
    throw unreadable('its data is broken or cut off')
  }
}

/**
 * Header, budget, then the pixels. Throws `not_an_image`, `image_unreadable` or `picture_too_large`.
 * Embedded profiles are never applied by the decoder: colours outside its output space would be clipped.
 */
export async function decodePicture(path: string): Promise<StoredPicture> {
  const header = await readPictureHeader(path)
  requireWithinBudget(header)
  const { light, converted } = colourOf(header)
  const { data, info } = await orUnreadable((converted ? asDisplayP3(path) : asStored(path, header)).toBuffer({ resolveWithObject: true }))
  const wide = converted || header.bitDepth === 16
  return {
    header, light, width: info.width, height: info.height, channels: info.channels,
    codes: wide ? new Uint16Array(data.buffer, data.byteOffset, data.length / 2) : data,
  }
}

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
  const greatest = codes instanceof Uint16Array ? 65535 : 255
  const tables = lightTables(picture.light, weights, greatest)
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
