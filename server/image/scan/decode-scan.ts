import type { ScanPicture } from '#shared/calibration/reading/picture'
import { decodePicture, type StoredPicture } from '../decode/decode'
import type { PictureHeader } from '../header/header'
import type { PictureSource } from '../protocol'
import { turnCodes, turnOf } from '../sample/turn'
import { pictureColour } from './picture-colour'

export interface DecodedScan { header: PictureHeader, picture: ScanPicture }

/**
 * A scan or a phone picture, upright, with its codes as they are stored and what they mean by the file's own profile (sRGB where
 * none). 8 bits stay 8 bits; transparency is left out. Throws `not_an_image`, `image_unreadable` or `picture_too_large`.
 */
export async function decodeScan(source: PictureSource): Promise<DecodedScan> {
  const picture = await decodePicture(source)
  const { width, height, channels, codes } = turnCodes(withoutAlpha(picture), turnOf(picture.header.orientation, 0))
  const colours = channels === 1 ? 1 : 3
  return { header: picture.header, picture: { width, height, channels: colours, ...pictureColour(codes, colours, picture.light) } }
}

/** One channel where the light has one, else three. */
export function withoutAlpha({ width, height, channels, codes, light }: StoredPicture) {
  const colours = light.curves.length
  if (channels === colours) return { width, height, channels, codes }
  const opaque = new (codes instanceof Uint16Array ? Uint16Array : Uint8Array)(width * height * colours)
  for (let from = 0, to = 0; from < codes.length; from += channels, to += colours) {
    for (let i = 0; i < colours; i++) opaque[to + i] = codes[from + i]!
  }
  return { width, height, channels: colours, codes: opaque }
}
