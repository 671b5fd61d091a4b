import sharp from 'sharp'
import { readProfile } from '../colour/icc-profile'
import { inputOptions, orUnreadable } from '../decode'
import { requireWithinBudget } from '../header/budget'
import type { PictureHeader } from '../header/header'
import { readPictureHeader } from '../header/read-header'
import type { ImageCalls } from '../protocol'
import { turnedSides, turnOf } from '../sample/turn'

function profileName({ icc, colour }: PictureHeader): string {
  const profile = icc && readProfile(icc)
  if (profile) return profile.description
  return colour === 'cmyk' ? 'CMYK, no profile' : 'sRGB, no profile'
}

/** Reads all of the picture's data once, holding little of it: a file cut off anywhere is refused at the door. */
async function requireWhole(path: string): Promise<void> {
  await orUnreadable(sharp(path, { ...inputOptions, ignoreIcc: true }).resize(32, 32, { fit: 'fill', kernel: 'nearest' }).raw().toBuffer())
}

export async function probePicture({ path }: ImageCalls['probe']['in']): Promise<ImageCalls['probe']['out']> {
  const header = await readPictureHeader(path)
  requireWithinBudget(header)
  await requireWhole(path)
  return {
    format: header.format, orientation: header.orientation, bitDepth: header.bitDepth, colourProfile: profileName(header),
    ...turnedSides(turnOf(header.orientation, 0), header.width, header.height),
  }
}
