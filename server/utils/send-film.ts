import type { H3Event } from 'h3'
import type { FilmFormat } from '#shared/schemas/negatives'
import { filmOrState, type FilmRequest } from '../services/renders'
import { answerNotModified, isKnownTo, privateAskAgain, sendStoredFile } from './send-file'

const mediaTypes: Record<FilmFormat, string> = { tiff: 'image/tiff', png: 'image/png', pdf: 'application/pdf' }

/** Sends a film file, or 202 and how far it is while it is being made. */
export async function sendFilm(event: H3Event, film: FilmRequest, fileName: string) {
  if (isKnownTo(event, film.key)) return answerNotModified(event, film.key)
  const made = await filmOrState(film)
  if ('file' in made) {
    return await sendStoredFile(event, { ...made.file, etag: film.key, contentType: mediaTypes[made.file.format], cacheControl: privateAskAgain, fileName })
  }
  setResponseStatus(event, 202)
  setResponseHeader(event, 'Retry-After', 1)
  return made.render
}
