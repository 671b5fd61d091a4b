import type { H3Event } from 'h3'
import { getHeader } from 'h3'
import { limits } from '#shared/schemas/limits'
import { enterStudio, requireOpenClass } from '../services/access'
import { lastUsedStudio } from '../services/people'
import { roomFor } from '../services/room'
import { personOfSession } from '../services/sessions'
import { storage } from '../services/storage'
import { holdShared, newUploadId } from '../services/uploads'
import { discardAll, receiveFiles } from './receive-files'
import { sessionIdOf } from './session-cookie'

/** Puts shared pictures where their person will be asked about them; answers the page to go on with. */
export async function receiveShared(event: H3Event): Promise<string> {
  const sessionId = await sessionIdOf(event)
  const person = sessionId && await personOfSession(sessionId)
  if (!person) return '/shared?why=sign-in'
  const last = await lastUsedStudio(person.id)
  if (!last) return '/shared?why=no-studio'
  const studio = await enterStudio(person, last, 'member')
  requireOpenClass(studio)
  const room = await roomFor(studio, Number(getHeader(event, 'content-length') ?? 0))
  const received = await receiveFiles(event, {
    field: 'file', maxFiles: limits.uploadMaxFiles, maxFileBytes: limits.fileMaxBytes, newId: newUploadId,
    openTemporary: () => storage().temporary('shared'), takeRoom: room.take,
  })
  try {
    const whole = received.flatMap(({ refusal, file, ...arrival }) => refusal || !file ? [] : [{ ...arrival, file }])
    for (const arrival of whole) await holdShared(studio, arrival)
    return whole.length > 0 ? `/s/${studio.slug}/photos` : '/shared?why=nothing'
  }
  finally {
    await discardAll(received)
  }
}
