import { createHash } from 'node:crypto'
import type { z } from 'zod'
import type { proxyQuery } from '#shared/schemas/photos'
import { straightenedFrame } from '#shared/sheet/crop'
import type { Geometry, PictureSource } from '../image/protocol'
import { engineVersion } from '../image/version'
import { storageKeys } from '../storage'
import { thumbnailLongerSidePixels } from './photo-intake'
import type { PhotoRow } from './photos'
import { imageChild } from './image-child'
import { storage } from './storage'

/** A picture in the cache, ready to be sent. */
export interface CachedPicture { key: string, bytes: number, etag: string }

const making = new Map<string, Promise<void>>()

/** The picture under a key, made first when the cache does not hold it; asked for twice at once, made once. */
export async function cachedPicture(key: string, make: (target: string) => Promise<unknown>): Promise<CachedPicture> {
  let held = await storage().stat(key)
  if (!held) {
    let work = making.get(key)
    if (!work) {
      work = makePicture(key, make).finally(() => making.delete(key))
      making.set(key, work)
    }
    await work
    held = await storage().stat(key)
    if (!held) throw new Error(`The picture ${key} is gone as soon as it was made.`)
  }
  else {
    // What is used stays longest.
    await storage().touch(key)
  }
  return { key, bytes: held.bytes, etag: createHash('sha256').update(`${key} ${engineVersion}`).digest('hex').slice(0, 32) }
}

async function makePicture(key: string, make: (target: string) => Promise<unknown>): Promise<void> {
  const file = await storage().temporary('picture')
  try {
    await make(file.path)
    await file.keep(key)
  }
  finally {
    await file.discard()
  }
}

/** A photo's file for the image child, and where its decoded codes may be kept. */
export const photoSource = async ({ studioId, id }: { studioId: string, id: string }): Promise<PictureSource> =>
  ({ path: await storage().localPath(storageKeys.original(studioId, id)), working: storage().ownPath(storageKeys.working(studioId, id)) })

export function thumbnailOf(photo: PhotoRow): Promise<CachedPicture> {
  return cachedPicture(storageKeys.thumbnail(photo.studioId, photo.id), async target =>
    imageChild().call('thumbnail', { ...await photoSource(photo), target, longerSide: thumbnailLongerSidePixels }))
}

/** The preview's starting point: working-space channels of the photo, or of a region of it when zoomed in. */
export async function proxyOf(photo: PhotoRow, query: z.infer<typeof proxyQuery>): Promise<CachedPicture & { width: number, height: number }> {
  const [x, y, cropWidth, cropHeight] = query.region ?? [0, 0, 1, 1]
  const geometry: Geometry = { quarterTurns: query.quarterTurns, straightenDegrees: query.straightenDegrees, crop: { x, y, width: cropWidth, height: cropHeight } }
  const frame = straightenedFrame(photo, geometry)
  const { width } = query
  const height = query.height ?? Math.min(2400, Math.max(1, Math.round(width * (cropHeight * frame.height) / (cropWidth * frame.width))))
  const asked = createHash('sha256').update(JSON.stringify([engineVersion, geometry, width, height])).digest('hex')
  const picture = await cachedPicture(storageKeys.picture(photo.studioId, photo.id, asked), async target =>
    imageChild().call('proxy', { ...await photoSource(photo), target, geometry, width, height }))
  return { ...picture, width, height }
}
