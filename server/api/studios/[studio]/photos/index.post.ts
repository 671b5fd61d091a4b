import { limits } from '#shared/schemas/limits'
import { photoEndpoints } from '#shared/schemas/photos'
import { arrivalLabel, newPhotoId, takePhotos } from '../../../../services/photo-intake'
import { roomFor } from '../../../../services/room'
import { storage } from '../../../../services/storage'
import { discardAll, receiveFiles } from '../../../../utils/receive-files'

export default defineRoute(photoEndpoints.uploadPhotos, async ({ event, studio }) => {
  const room = await roomFor(studio, Number(getHeader(event, 'content-length') ?? 0))
  const received = await receiveFiles(event, {
    field: 'file',
    maxFiles: limits.uploadMaxFiles,
    maxFileBytes: limits.fileMaxBytes,
    newId: newPhotoId,
    openTemporary: id => storage().temporary(arrivalLabel(studio.id, id)),
    takeRoom: room.take,
  })
  try {
    const { items, refused, anyNew } = await takePhotos(studio, received)
    setResponseStatus(event, anyNew ? 201 : 200)
    return { items, refused }
  }
  finally {
    await discardAll(received)
  }
})
