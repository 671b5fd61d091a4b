import { and, eq, inArray, sql } from 'drizzle-orm'
import { v7 as uuidv7 } from 'uuid'
import type { z } from 'zod'
import { ComputeError, errorCodes, type ErrorCode } from '#shared/errors'
import type { FilmFormat, render } from '#shared/schemas/negatives'
import { db, type Queryable, type Transaction } from '../db/client'
import { renders } from '../db/schema'
import type { FilmOrder, WedgeFilmOrder } from '../image/protocol'
import { sendJob } from '../jobs/queue'
import { storageKeys } from '../storage'
import { hint } from './hints'
import { storage } from './storage'

export type RenderRow = typeof renders.$inferSelect
export type Render = z.infer<typeof render>

/** A film file as it is asked for: everything that decides its bytes, and the key that follows from it. */
export interface FilmRequest { studioId: string, of: { photoId: string } | { wedgeId: string }, key: string, order: FilmOrder | WedgeFilmOrder, requestId?: string }

export const showRender = ({ id, format, state, progress, bytes, sha256, errorCode, errorMessage }: RenderRow): Render =>
  ({ id, format, state, progress, bytes, sha256, error: errorCode === null ? null : { code: errorCode, message: errorMessage ?? '' } })

const byKey = (film: { studioId: string, key: string }) => and(eq(renders.studioId, film.studioId), eq(renders.renderKey, film.key))

/** The rows there are for these keys, by key. */
export async function rendersByKey(studioId: string, keys: string[]): Promise<Map<string, RenderRow>> {
  if (keys.length === 0) return new Map()
  const rows = await db().select().from(renders).where(and(eq(renders.studioId, studioId), inArray(renders.renderKey, keys)))
  return new Map(rows.map(row => [row.renderKey, row]))
}

/** Has the film made unless it is ready, in the making, or has failed. */
export async function requestRender(film: FilmRequest): Promise<RenderRow> {
  return db().transaction(async (tx) => {
    const [fresh] = await tx.insert(renders).values({
      studioId: film.studioId, id: uuidv7(), ...film.of, renderKey: film.key,
      format: film.order.format, order: film.order, state: 'waiting', requestId: film.requestId?.slice(0, 64),
    }).onConflictDoNothing({ target: [renders.studioId, renders.renderKey] }).returning()
    if (fresh) return enqueue(tx, fresh)
    const [row] = await tx.select().from(renders).where(byKey(film))
    return row!
  })
}

/** The same, and a film that has failed is tried again. */
export async function retryRender(film: FilmRequest): Promise<RenderRow> {
  const row = await requestRender(film)
  return row.state === 'failed' ? restart(row, 'failed') : row
}

async function restart(row: RenderRow, from: 'failed' | 'ready'): Promise<RenderRow> {
  return db().transaction(async (tx) => {
    const [again] = await tx.update(renders)
      .set({ state: 'waiting', progress: 0, failures: 0, leaseOwner: null, leaseUntil: null, errorCode: null, errorMessage: null, bytes: null, sha256: null, readyAt: null })
      .where(and(eq(renders.studioId, row.studioId), eq(renders.id, row.id), eq(renders.state, from))).returning()
    return again ? enqueue(tx, again) : { ...row, state: 'waiting' as const }
  })
}

async function enqueue(tx: Transaction, row: RenderRow): Promise<RenderRow> {
  await sendJob(tx, 'make-render', { studioId: row.studioId, renderId: row.id })
  await hintRender(tx, row)
  return row
}

export const hintRender = (on: Queryable, row: { studioId: string, id: string, fence: number }): Promise<void> =>
  hint(on, { studioId: row.studioId, topic: 'renders', id: row.id, revision: row.fence + 1 })

export interface ReadyFilm { key: string, bytes: number, format: FilmFormat }

/** The film's file when it is ready, else how far it is; asking for it has it made. Throws why it failed. */
export async function filmOrState(film: FilmRequest): Promise<{ file: ReadyFilm } | { render: Render }> {
  const row = await requestRender(film)
  if (row.state === 'failed') throw new ComputeError(knownCode(row.errorCode), `This film could not be made. ${row.errorMessage ?? ''} Have it made again, or change its settings.`)
  if (row.state !== 'ready') return { render: showRender(row) }

  const key = storageKeys.film(row.studioId, row.renderKey, row.format)
  const held = await storage().stat(key)
  // The file is a cache's: one that got lost is made again.
  if (!held) return { render: showRender(await restart(row, 'ready')) }
  await db().update(renders).set({ lastUsedAt: sql`now()` }).where(byKey(film))
  return { file: { key, bytes: held.bytes, format: row.format } }
}

const knownCode = (code: string | null): ErrorCode => code !== null && code in errorCodes ? code as ErrorCode : 'image_child_failed'
