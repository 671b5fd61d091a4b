import sharp from 'sharp'
import { nameOfCodePoints } from '../colour/code-points'
import { readProfile } from '../colour/icc-profile'
import { colourOf, decodePicture, isSlow, orUnreadable } from '../decode/decode'
import { inputOptions } from '../decode/with-sharp'
import { requireWithinBudget } from '../header/budget'
import type { PictureHeader } from '../header/header'
import { readPictureHeader } from '../header/read-header'
import type { ImageCalls, PictureSource } from '../protocol'
import { turnedSides, turnOf } from '../sample/turn'

function profileName({ icc, colour, codePoints, exponent }: PictureHeader): string {
  const profile = icc && readProfile(icc)
  if (colour === 'cmyk' && profile?.kind !== 'table') return 'CMYK without a usable profile, read as for a common coated press'
  if (codePoints) return nameOfCodePoints(codePoints)
  if (profile) return profile.description
  return exponent ? `sRGB’s colours, exponent ${Number(exponent.toFixed(2))}` : 'sRGB, no profile'
}

/**
 * Reads all of the picture's data once and gives its sides: a file cut off anywhere is refused at the door. What is quick to decode
 * is read holding little of it; what is slow is decoded whole, and its codes kept for the calls that follow.
 */
async function sidesOfWhole(source: PictureSource, header: PictureHeader): Promise<{ width: number, height: number }> {
  const { table } = colourOf(header)
  if (isSlow(header, table)) return decodePicture(source)
  await orUnreadable(sharp(source.path, { ...inputOptions, ignoreIcc: true }).resize(32, 32, { fit: 'fill', kernel: 'nearest' }).raw().toBuffer())
  return header
}

export async function probePicture(source: ImageCalls['probe']['in']): Promise<ImageCalls['probe']['out']> {
  const header = await readPictureHeader(source.path)
  requireWithinBudget(header)
  const { width, height } = await sidesOfWhole(source, header)
  return {
    format: header.format, orientation: header.orientation, bitDepth: header.bitDepth, colourProfile: profileName(header), notes: header.notes ?? [],
    ...turnedSides(turnOf(header.orientation, 0), width, height),
  }
}
