import { and, eq, max } from 'drizzle-orm'
import type { z } from 'zod'
import { assumedTransferDeviation } from '#shared/calibration/film-densities'
import { ComputeError } from '#shared/errors'
import type { FilmDensities, tabletEndpoints } from '#shared/schemas/calibration'
import type { Curve } from '#shared/schemas/curves'
import { db, type Queryable } from '../db/client'
import { curves, filmDensities } from '../db/schema'
import type { StudioAccess } from './access'
import { recordEvent } from './audit'
import { findBench, lockBench, type BenchRow } from './benches'
import { bodyHashOf, createOnce, idFor } from './creation'
import { curveOf, findCurve } from './curves'
import { hint } from './hints'
import { imageChild } from './image-child'
import { keyset, toPage, type Page } from './paging'
import { requireFound } from './revisions'
import { findTablet } from './tablets'

type Row = typeof filmDensities.$inferSelect
type Body = z.infer<typeof tabletEndpoints.createFilmDensities.body>
type FilmCurveBody = z.infer<typeof tabletEndpoints.filmCurve.body>

export async function listFilmDensities(studio: StudioAccess, benchId: string, page: Page) {
  requireFound(await findBench(db(), studio.id, benchId))
  const { after, order, take } = keyset(filmDensities.id, page)
  const rows = await db().select().from(filmDensities).where(and(eq(filmDensities.studioId, studio.id), eq(filmDensities.benchId, benchId), after)).orderBy(order).limit(take)
  return toPage(rows, page, shown)
}

/** Splits film from paper by a tablet and a curve of one bench. */
export async function createFilmDensities(studio: StudioAccess, benchId: string, body: Body): Promise<{ created: boolean, item: FilmDensities }> {
  requireFound(await findBench(db(), studio.id, benchId))
  const tablet = await findTablet(db(), studio.id, benchId, body.tabletId)
  const curve = await findCurve(db(), studio.id, body.curveId)
  requireOwn(tablet, 'tabletId', 'This bench has no such step tablet.')
  requireOwn(curve?.benchId === benchId && curve.responseLow && curve.responseHigh ? curve : undefined, 'curveId', 'This bench has no such curve with a band.')
  const wedge = { response: curve!.response, low: curve!.responseLow!, high: curve!.responseHigh! }
  const points = await imageChild().call('splitFilm', { wedge, steps: tablet!.values })
  const [id, bodyHash] = [idFor(body), bodyHashOf({ ...body, benchId })]
  return await db().transaction(async (tx) => {
    const { created, row } = await createOnce(bodyHash,
      async () => (await tx.insert(filmDensities).values({ studioId: studio.id, id, benchId, tabletId: body.tabletId, curveId: body.curveId, points, bodyHash, createdBy: studio.personId }).onConflictDoNothing().returning())[0],
      () => find(tx, studio.id, id))
    if (created) {
      await recordEvent(tx, { studioId: studio.id, userId: studio.personId, kind: 'film-densities.created', recordId: id, details: { benchId } })
      await hint(tx, { studioId: studio.id, topic: 'film-densities', id })
    }
    return { created, item: shown(row) }
  })
}

/** A draft curve of a bench that has a tablet strip only, through film densities found on another bench with the same film side. */
export async function createFilmCurve(studio: StudioAccess, benchId: string, tabletId: string, body: FilmCurveBody): Promise<{ created: boolean, item: Curve }> {
  const bench = requireFound(await findBench(db(), studio.id, benchId))
  const tablet = requireFound(await findTablet(db(), studio.id, benchId, tabletId))
  const film = await find(db(), studio.id, body.filmDensitiesId)
  requireOwn(film, 'filmDensitiesId', 'There are no such film densities.')
  requireSameFilm(bench, requireFound(await findBench(db(), studio.id, film!.benchId)))
  const [id, bodyHash] = [idFor(body), bodyHashOf({ ...body, benchId, tabletId })]
  const { response, low, high } = await imageChild().call('curveThroughFilm', { film: film!.points, steps: tablet.values })
  return await db().transaction(async (tx) => {
    await lockBench(tx, studio.id, benchId)
    const [latest] = await tx.select({ version: max(curves.version) }).from(curves).where(and(eq(curves.studioId, studio.id), eq(curves.benchId, benchId)))
    const { created } = await createOnce(bodyHash, async () => (await tx.insert(curves).values({
      studioId: studio.id, id, benchId, version: (latest?.version ?? 0) + 1, state: 'draft', aim: body.aim ?? 'even-lightness', calibrated: true,
      response, responseLow: low, responseHigh: high, assumptions: [transferSays], warnings: [{ code: 'through_film', message: transferSays }], notes: body.notes, bodyHash, createdBy: studio.personId,
    }).onConflictDoNothing({ target: [curves.studioId, curves.id] }).returning())[0], () => findCurve(tx, studio.id, id))
    if (created) {
      await recordEvent(tx, { studioId: studio.id, userId: studio.personId, kind: 'curves.created', recordId: id, details: { benchId, throughFilm: body.filmDensitiesId } })
      await hint(tx, { studioId: studio.id, topic: 'curves', id })
      await hint(tx, { studioId: studio.id, topic: 'benches', id: benchId })
    }
    return created
  }).then(async created => ({ created, item: await curveOf(studio, id) }))
}

const transferSays = `No wedge of this bench was read: the curve rests on its step tablet and on film densities found with another paper, taken to hold here within ± ${assumedTransferDeviation} (an assumption of ours, no source). A wedge print makes it better.`

/** What decides the film's side: another film, ink or lamp has other densities, and another process sees other light. */
const filmParts = ['process', 'filmId', 'inkjetId', 'lampId', 'ink', 'path'] as const satisfies (keyof BenchRow)[]

function requireSameFilm(bench: BenchRow, other: BenchRow): void {
  const different = filmParts.filter(part => bodyHashOf({ part: bench[part] }) !== bodyHashOf({ part: other[part] }))
  if (different.length > 0) throw new ComputeError('invalid_input', 'Film densities hold for one film, ink, path, lamp and process. These benches differ in more than their paper.', different.map(part => ({ path: 'filmDensitiesId', message: `The other bench has another ${part}.` })))
}

function requireOwn(record: object | undefined, path: string, message: string): void {
  if (!record) throw new ComputeError('invalid_input', message, [{ path, message }])
}

async function find(on: Queryable, studioId: string, id: string): Promise<Row | undefined> {
  return (await on.select().from(filmDensities).where(and(eq(filmDensities.studioId, studioId), eq(filmDensities.id, id))))[0]
}

const shown = ({ id, benchId, tabletId, curveId, points, warnings, createdAt }: Row): FilmDensities => ({ id, benchId, tabletId, curveId, points, warnings, createdAt: createdAt.toISOString() })
