import { ComputeError } from '#shared/errors'
import { renders } from '../db/schema'
import type { CallOptions } from '../image/pool'
import { hintBoardOfPhoto } from '../services/class-hints'
import { filmChild } from '../services/image-child'
import { hintRender, type RenderRow } from '../services/renders'
import { photoSource } from '../services/photo-pictures'
import { storage } from '../services/storage'
import { storageKeys } from '../storage'
import type { LeasedWork } from './leased-work'
import { leasesOf } from './leases'

const leases = leasesOf(renders, hintRender)

/** Films: each is made in the child, put in place and recorded. */
export const filmWork: LeasedWork<typeof renders> = {
  noun: 'render',
  leases,
  async work(lease, calls, { owner }) {
    const { studioId, photoId, renderKey, format } = lease.row
    const file = await storage().temporary(`film_${owner}`)
    try {
      const made = await callFor(lease.row, file.path, calls)
      await leases.commit(lease, async (tx) => {
        await file.keep(storageKeys.film(studioId, renderKey, format))
        if (photoId) await hintBoardOfPhoto(tx, studioId, photoId)
        return { ...made, lastUsedAt: new Date() }
      })
    }
    finally {
      await file.discard()
    }
  },
}

/** A negative's film is made of its photo, a wedge's of its record alone. */
async function callFor({ studioId, photoId, renderKey, order }: RenderRow, target: string, options: CallOptions) {
  if (!('geometry' in order)) return filmChild().call('wedgeFilm', { target, order, renderKey }, options)
  if (photoId === null) throw new ComputeError('unavailable', 'This film has no photo to be made of.')
  return filmChild().call('film', { ...await photoSource({ studioId, id: photoId }), target, order, renderKey }, options)
}
