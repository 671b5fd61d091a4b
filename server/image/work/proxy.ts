import { closeSync, openSync, writeSync } from 'node:fs'
import { decodePicture, type StoredPicture } from '../decode/decode'
import { lightPlane } from '../light-plane'
import type { Geometry, ImageCalls } from '../protocol'
import { placePixels } from '../sample/placement'
import { toneRows } from '../sample/tone-rows'

/** Interleaved L*-coded working-space channels of exactly `width` × `height` pixels. */
export function workingChannels(picture: StoredPicture, geometry: Geometry, width: number, height: number): Uint16Array {
  const placement = placePixels({ ...picture, orientation: picture.header.orientation }, geometry, width, height)
  const channels = new Uint16Array(3 * width * height)
  for (const [channel, weights] of ([[1, 0, 0], [0, 1, 0], [0, 0, 1]] as const).entries()) {
    let at = channel
    for (const row of toneRows(lightPlane(picture, weights), placement)) {
      for (let i = 0; i < width; i++, at += 3) channels[at] = row[i]!
    }
  }
  return channels
}

export async function makeProxy({ target, geometry, width, height, ...source }: ImageCalls['proxy']['in']): Promise<ImageCalls['proxy']['out']> {
  const channels = workingChannels(await decodePicture(source), geometry, width, height)
  const bytes = Buffer.from(channels.buffer)
  const file = openSync(target, 'w')
  try {
    for (let done = 0; done < bytes.length;) done += writeSync(file, bytes, done)
  }
  finally {
    closeSync(file)
  }
  return { width, height }
}
