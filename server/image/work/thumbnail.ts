import sharp from 'sharp'
import { mixWeights, neutralMix } from '#shared/tone/mix'
import { linearToSrgb } from '#shared/tone/srgb'
import { linearTable } from '#shared/tone/working-space'
import { decodePicture } from '../decode/decode'
import { lightPlane } from '../light-plane'
import type { ImageCalls } from '../protocol'
import { partSides, placePixels } from '../sample/placement'
import { toneRows } from '../sample/tone-rows'

const wholePicture = { quarterTurns: 0, straightenDegrees: 0, crop: { x: 0, y: 0, width: 1, height: 1 } }

/** sRGB grey of each tone code. */
let greys: Uint8Array | undefined
const greyTable = () => greys ??= Uint8Array.from(linearTable(), linear => Math.round(255 * linearToSrgb(Math.min(1, linear))))

export async function makeThumbnail({ target, longerSide, ...file }: ImageCalls['thumbnail']['in']): Promise<ImageCalls['thumbnail']['out']> {
  const picture = await decodePicture(file)
  const source = { width: picture.width, height: picture.height, orientation: picture.header.orientation }
  const sides = partSides(source, wholePicture)
  const scale = Math.min(1, longerSide / Math.max(sides.width, sides.height))
  const width = Math.max(1, Math.round(sides.width * scale)), height = Math.max(1, Math.round(sides.height * scale))
  const table = greyTable()
  const pixels = Buffer.alloc(width * height)
  let at = 0
  for (const row of toneRows(lightPlane(picture, mixWeights(neutralMix)), placePixels(source, wholePicture, width, height))) {
    for (let i = 0; i < width; i++) pixels[at++] = table[row[i]!]!
  }
  await sharp(pixels, { raw: { width, height, channels: 1 } }).toColourspace('b-w').jpeg({ quality: 82 }).toFile(target)
  return { width, height }
}
