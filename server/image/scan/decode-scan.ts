import sharp, { type Sharp } from 'sharp'
import type { ScanPicture } from '#shared/calibration/reading/picture'
import { asDisplayP3, colourOf, inputOptions, orUnreadable } from '../decode'
import { requireWithinBudget } from '../header/budget'
import { pictureFormats, type PictureHeader, unreadable } from '../header/header'
import { readPictureHeader } from '../header/read-header'
import { decodeHeic } from './decode-heic'
import { pictureColour } from './picture-colour'

export interface DecodedScan { header: PictureHeader, picture: ScanPicture }

/**
 * A scan or a phone picture, upright, with its codes as they are stored and what they mean by the file's own profile (sRGB where
 * none). 8 bits stay 8 bits. Throws `not_an_image`, `image_unreadable` or `picture_too_large`, the latter before anything is decoded.
 */
export async function decodeScan(path: string): Promise<DecodedScan> {
  const header = await readPictureHeader(path, pictureFormats)
  requireWithinBudget(header)
  const { light, converted } = colourOf(header)
  if (header.format === 'heic') {
    const { width, height, codes } = await orUnreadable(decodeHeic(path))
    return { header, picture: { width, height, channels: 4, ...pictureColour(codes, 4, light) } }
  }
  const { data, info } = await orUnreadable((converted ? asDisplayP3(path).autoOrient() : asStored(path, header)).toBuffer({ resolveWithObject: true }))
  if (info.channels !== 1 && info.channels !== 3) throw unreadable('its colours are stored in a rare way (export it as RGB or grey)')
  const codes = converted || header.bitDepth === 16 ? new Uint16Array(data.buffer, data.byteOffset, data.length / 2) : data
  return { header, picture: { width: info.width, height: info.height, channels: info.channels, ...pictureColour(codes, info.channels, light) } }
}

function asStored(path: string, { bitDepth, colour }: PictureHeader): Sharp {
  const picture = sharp(path, { ...inputOptions, ignoreIcc: true }).autoOrient().removeAlpha()
  if (bitDepth === 16) return picture.toColourspace(colour === 'grey' ? 'grey16' : 'rgb16').raw({ depth: 'ushort' })
  return picture.toColourspace(colour === 'grey' ? 'b-w' : 'srgb').raw()
}
