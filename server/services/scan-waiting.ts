import { setTimeout as sleep } from 'node:timers/promises'
import { and, eq } from 'drizzle-orm'
import { ComputeError, errorCodes, type ErrorCode } from '#shared/errors'
import type { Reading } from '#shared/schemas/curves'
import { readSettings } from '../config'
import { db } from '../db/client'
import { readings } from '../db/schema'
import { storageKeys } from '../storage'
import { readReadings, type ReadingRow } from './reading-view'
import { storage } from './storage'

/** How often a waiting answer looks whether its reading is done. */
const lookMs = 100

/** What nobody can mend by trying again with this very file at this place: refused, and nothing of it is kept. */
const refusals = new Set<ErrorCode>(['not_an_image', 'image_unreadable', 'picture_too_large', 'other_wedge', 'wedge_unknown'])

/**
 * Waits a while for a reading's end. A new one that fails by the file's own fault within that time is removed and thrown as what it
 * is; any other stays, failed or not, since corners put by hand or another choice may still make it readable.
 */
export async function doneOrNot({ studioId, id }: ReadingRow, unreadable: 'refuse' | 'keep'): Promise<{ isDone: boolean, item: Reading }> {
  const where = and(eq(readings.studioId, studioId), eq(readings.id, id))
  const deadline = Date.now() + 1000 * readSettings().READING_WAIT_SECONDS
  let state: string | undefined
  do {
    [{ state } = { state: undefined }] = await db().select({ state: readings.state }).from(readings).where(where)
    if (state === 'ready' || state === 'failed') break
    await sleep(lookMs)
  } while (Date.now() < deadline)
  const [item] = await readReadings(db(), where)
  if (!item) throw new ComputeError('not_found', 'This reading has been removed meanwhile.')
  const refusal = unreadable === 'refuse' && item.state === 'failed' ? item.error : null
  if (refusal && refusals.has(refusal.code as ErrorCode)) {
    await db().delete(readings).where(and(where, eq(readings.state, 'failed')))
    await storage().remove(storageKeys.scan(studioId, id))
    throw new ComputeError(refusal.code as ErrorCode, refusal.message)
  }
  return { isDone: item.state === 'ready' || item.state === 'failed', item }
}

/** Whether a reading is done; a failed one is thrown as what it is. Its scan stays and can be read again with corners put by hand. */
export function requireRead({ state, error }: Reading): boolean {
  if (state === 'failed') throw new ComputeError(error!.code in errorCodes ? error!.code as ErrorCode : 'wedge_not_found', error!.message)
  return state === 'ready'
}
