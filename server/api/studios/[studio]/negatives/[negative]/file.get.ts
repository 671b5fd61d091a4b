import { negativeEndpoints } from '#shared/schemas/negatives'
import { filmFileName } from '../../../../../services/file-names'
import { requireParts } from '../../../../../services/negative-parts'
import { filmRequest } from '../../../../../services/negatives'
import { filmOrState } from '../../../../../services/renders'

const mediaTypes = { tiff: 'image/tiff', png: 'image/png', pdf: 'application/pdf' } as const

export default defineRoute(negativeEndpoints.negativeFile, async ({ event, studio, query, idParam }) => {
  const parts = await requireParts(studio, idParam('negative'))
  const film = filmRequest(parts, query.format, event.context.requestId)
  if (isKnownTo(event, film.key)) return answerNotModified(event, film.key)
  const made = await filmOrState(film)
  if ('file' in made) {
    return await sendStoredFile(event, {
      ...made.file, etag: film.key, contentType: mediaTypes[query.format], cacheControl: privateAskAgain, fileName: filmFileName(parts, query.format),
    })
  }
  setResponseStatus(event, 202)
  setResponseHeader(event, 'Retry-After', 1)
  return made.render
})
