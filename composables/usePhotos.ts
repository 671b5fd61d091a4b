import { contract } from '#build/client-contract'
import type { Negative } from '#shared/schemas/negatives'
import type { Photo } from '#shared/schemas/photos'

/** The photos of this studio that one may see (or those in the bin), with the newest negative of each. */
export function usePhotos({ bin = false } = {}) {
  const { call } = useApi()
  const studio = useStudioStore()
  const params = (photo: Photo) => ({ ...studio.params, photo: photo.id })

  const photos = usePages<Photo>(cursor => call(contract.listPhotos, { params: studio.params, query: { bin: bin ? 'true' : undefined, cursor, limit: 48 } }))
  const negatives = usePages<Negative>(cursor => call(contract.listNegatives, { params: studio.params, query: { cursor, limit: 100 } }))
  const negativesOf = computed(() => {
    const byPhoto = new Map<string, Negative[]>()
    for (const negative of negatives.items.value) byPhoto.set(negative.photoId, [...byPhoto.get(negative.photoId) ?? [], negative])
    return byPhoto
  })

  const reload = () => Promise.all([photos.reload(), bin ? undefined : negatives.readAll()])
  useHints(['photos', 'negatives'], reload)

  /** An upload that arrived: on top of the list, out of the bin if it lay there. Answers whether it was here before. */
  function takeIn(photo: Photo): boolean {
    const wasHere = photos.items.value.some(p => p.id === photo.id)
    if (photo.binnedAt) void restore(photo)
    if (!wasHere) photos.items.value = [photo, ...photos.items.value]
    return wasHere || photo.binnedAt !== null
  }

  async function putIntoBin(photo: Photo) {
    await call(contract.binPhoto, { params: params(photo) })
    photos.items.value = photos.items.value.filter(p => p.id !== photo.id)
  }

  async function restore(photo: Photo) {
    await call(contract.restorePhoto, { params: params(photo) })
    await photos.reload()
  }

  async function rename(photo: Photo, name: string) {
    const renamed = await call(contract.changePhoto, { params: params(photo), body: { name, revision: photo.revision } })
    photos.items.value = photos.items.value.map(p => p.id === renamed.id ? renamed : p)
  }

  const thumbnailOf = (photo: Photo) => addressOf(contract.photoThumbnail, params(photo))
  const picturesOf = (photo: Photo) => {
    const newest = negativesOf.value.get(photo.id)?.[0]
    return newest ? negativePictures(studio.slug, newest) : { photo: thumbnailOf(photo) }
  }

  return { photos, negativesOf, reload, takeIn, putIntoBin, restore, rename, thumbnailOf, picturesOf }
}
