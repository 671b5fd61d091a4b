import { createHash } from 'node:crypto'
import { engineVersion } from '../image/version'
import { storageKeys } from '../storage'
import { canonicalJson } from './creation'
import { filmOrder } from './film-order'
import { imageChild } from './image-child'
import type { NegativeParts } from './negative-parts'
import { cachedPicture, photoSource, type CachedPicture } from './photo-pictures'

/** One state of the triptych as a picture, made by the same code as the film. */
export function forecastOf(parts: NegativeParts, { width, state }: { width: number, state: 'photo' | 'film' | 'print' }): Promise<CachedPicture> {
  const { photo, bench, curve } = parts
  const order = filmOrder(parts, 'png')
  const palette = state === 'print' ? curve.colourPath ?? bench.process : state
  const asked = createHash('sha256').update(canonicalJson({ engine: engineVersion, order, width, state, palette })).digest('hex')
  return cachedPicture(storageKeys.picture(photo.studioId, photo.id, asked), async target =>
    imageChild().call('forecast', { ...await photoSource(photo), target, order, width, state, palette }))
}
