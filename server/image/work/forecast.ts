import sharp from 'sharp'
import { mixToTonePlane, mixWeights } from '#shared/tone/mix'
import { lightTableLightness, lookColour, type PaletteKind } from '#shared/tone/palettes'
import { stateLook, statePixels, type TriptychState } from '#shared/tone/triptych'
import { decodePicture } from '../decode/decode'
import { placePicture } from '../film/layout'
import type { FilmOrder, ImageCalls } from '../protocol'
import { partSides } from '../sample/placement'
import { workingChannels } from './proxy'

/** Colour around a contained picture: what the margin will be. The photo stands on white. */
function fillPixel(state: TriptychState, { margin, tone }: FilmOrder, printLook: PaletteKind): number {
  const isClear = margin.kind === 'clear'
  const lightness = { photo: 100, film: lightTableLightness(isClear ? 0 : 1), print: tone.response.at(isClear ? 0 : -1)! }[state]
  const [red, green, blue] = lookColour(stateLook(state, printLook), lightness)
  return ((255 << 24) | (blue << 16) | (green << 8) | red) >>> 0
}

/** The page's preview of the same pixels, made by the same functions: channels first, then mix and table pixel by pixel. */
export async function makeForecast({ target, order, width, state, palette, ...source }: ImageCalls['forecast']['in']): Promise<ImageCalls['forecast']['out']> {
  const picture = await decodePicture(source)
  const height = Math.max(1, Math.round(width * order.picture.heightPixels / order.picture.widthPixels))
  const inner = placePicture(partSides({ ...picture, orientation: picture.header.orientation }, order.geometry), width, height)
  const plane = new Uint16Array(inner.width * inner.height)
  mixToTonePlane(workingChannels(picture, order.geometry, inner.width, inner.height), mixWeights(order.tone.adjustments.mix), plane)
  const table = statePixels(state, order.tone, palette)
  const pixels = new Uint32Array(width * height).fill(fillPixel(state, order, palette))
  const isMirrored = state === 'film' && order.mirror
  for (let y = 0, from = 0; y < inner.height; y++) {
    const line = (inner.y + y) * width
    for (let x = inner.x; x < inner.x + inner.width; x++, from++) pixels[line + (isMirrored ? width - 1 - x : x)] = table[plane[from]!]!
  }
  await sharp(Buffer.from(pixels.buffer), { raw: { width, height, channels: 4 } }).removeAlpha().png({ compressionLevel: 6 }).toFile(target)
  return { width, height }
}
