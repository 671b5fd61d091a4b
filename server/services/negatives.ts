import { and, eq, isNull, sql } from 'drizzle-orm'
import type { z } from 'zod'
import type { Aim } from '#shared/schemas/curves'
import { filmFormats, type Negative, type negativeBody, type negativePatch } from '#shared/schemas/negatives'
import { aimForChannel } from '#shared/tone/aims'
import { db, type Queryable } from '../db/client'
import { negatives, type NegativeSettings } from '../db/schema'
import type { StudioAccess } from './access'
import { recordEvent } from './audit'
import { hintBoardOf } from './class-hints'
import { bodyHashOf, createOnce, idFor } from './creation'
import { requireFilmFits } from './film-limits'
import { filmOrder, filmSize, renderKey, resolveCrop } from './film-order'
import { hint } from './hints'
import { benchForNegative, chooseCurve, photoForNegative } from './negative-choices'
import { ownedBy, readParts, requireOwnParts, requireParts, type NegativeParts, type NegativeRow } from './negative-parts'
import { negativeWarnings } from './negative-warnings'
import { keyset, toPage, type Page } from './paging'
import { rendersByKey, showRender, type FilmRequest, type RenderRow } from './renders'
import { requireCurrent } from './revisions'

export async function listNegatives(studio: StudioAccess, page: Page & { photoId?: string }) {
  const { after, order, take } = keyset(negatives.id, page)
  const ofPhoto = page.photoId ? eq(negatives.photoId, page.photoId) : undefined
  const parts = await readParts(and(ownedBy(studio), isNull(negatives.archivedAt), ofPhoto, after), order, take)
  const shown = new Map((await showAll(parts)).map(negative => [negative.id, negative]))
  return toPage(parts.map(p => p.negative), page, ({ id }) => shown.get(id)!)
}

export const negativeOf = async (studio: StudioAccess, id: string): Promise<Negative> => show(await requireParts(studio, id))

/** The curve is resolved and stored here; a later one is offered, never applied by itself. */
export async function createNegative(studio: StudioAccess, body: z.infer<typeof negativeBody>): Promise<{ created: boolean, item: Negative }> {
  const { id: _, photoId, benchId, process, curveId, name, aim, mirror, crop, ...settings } = body
  const id = idFor(body)
  const bodyHash = bodyHashOf(body)
  const find = async () => (await db().select().from(negatives).where(and(ownedBy(studio), eq(negatives.id, id))))[0]
  const { created } = await createOnce(bodyHash, async () => {
    if (body.id && await find()) return undefined
    const photo = await photoForNegative(studio, photoId)
    const bench = await benchForNegative(studio, { benchId, process })
    const curve = await chooseCurve(studio, bench.id, curveId ?? 'in-use')
    const resolved: NegativeSettings = { ...settings, crop: crop ?? null, mirror: mirror ?? bench.mirror }
    requireFilmFits(filmSize(resolved), resolved.pixelsPerInch)
    return db().transaction(async (tx) => {
      const [row] = await tx.insert(negatives).values({
        studioId: studio.id, id, bodyHash, name: name ?? photo.name, photoId, benchId: bench.id, curveId: curve.id, aim: aimForChannel(aim ?? curve.aim, bench.readingChannel), settings: resolved, createdBy: studio.personId,
      }).onConflictDoNothing({ target: [negatives.studioId, negatives.id] }).returning()
      if (row) await tell(tx, row, 'created')
      return row
    })
  }, find)
  return { created, item: await negativeOf(studio, id) }
}

/** What is left out stays. Another bench brings its own curve in use and its own mirroring, unless they are named too. */
export async function changeNegative(studio: StudioAccess, id: string, patch: z.infer<typeof negativePatch>): Promise<Negative> {
  const { revision, name, benchId, curveId, aim, ...changes } = patch
  const { negative, bench } = await requireOwnParts(studio, id)
  requireCurrent(negative, revision)
  const movesTo = benchId !== undefined && benchId !== negative.benchId ? await benchForNegative(studio, { benchId }) : undefined
  const wantedCurve = curveId ?? (movesTo ? 'in-use' : undefined)
  const curve = wantedCurve === undefined ? undefined : await chooseCurve(studio, movesTo?.id ?? negative.benchId, wantedCurve)
  const settings = { ...negative.settings, ...(movesTo ? { mirror: movesTo.mirror } : {}), ...withoutUndefined(changes) }
  requireFilmFits(filmSize(settings), settings.pixelsPerInch)
  const wantedAim = await nextAim(studio, negative, aim, curve?.aim)
  await db().transaction(async (tx) => {
    const [row] = await tx.update(negatives).set({
      name, settings, benchId: movesTo?.id, curveId: curve?.id, aim: aimForChannel(wantedAim ?? negative.aim, (movesTo ?? bench).readingChannel), revision: sql`${negatives.revision} + 1`,
    }).where(and(eq(negatives.studioId, studio.id), eq(negatives.id, id), eq(negatives.revision, revision))).returning()
    if (row) return tell(tx, row, 'changed')
    requireCurrent((await requireParts(studio, id, tx)).negative, revision)
  })
  return negativeOf(studio, id)
}

/** `null` goes back to the curve's own aim; a new curve's aim counts only where nothing else was chosen before. */
async function nextAim(studio: StudioAccess, negative: NegativeRow, asked: Aim | null | undefined, ofNewCurve: Aim | undefined): Promise<Aim | undefined> {
  if (asked === undefined) return undefined
  return asked ?? ofNewCurve ?? (await requireParts(studio, negative.id)).curve.aim
}

/** Put away: it is in no list any more. Its films stay in the cache until room is needed. */
export async function archiveNegative(studio: StudioAccess, id: string): Promise<void> {
  await db().transaction(async (tx) => {
    const { negative } = await requireOwnParts(studio, id, tx)
    const [row] = await tx.update(negatives).set({ archivedAt: sql`now()`, revision: sql`${negatives.revision} + 1` })
      .where(and(eq(negatives.studioId, studio.id), eq(negatives.id, negative.id))).returning()
    await tell(tx, row!, 'archived')
  })
}

async function tell(on: Queryable, row: NegativeRow, verb: string): Promise<void> {
  await recordEvent(on, { studioId: row.studioId, userId: row.createdBy, kind: `negatives.${verb}`, recordId: row.id })
  await tellNegative(on, row)
  await hintBoardOf(on, row.studioId, row.createdBy)
}

export const tellNegative = (on: Queryable, row: NegativeRow): Promise<void> =>
  hint(on, { studioId: row.studioId, topic: 'negatives', id: row.id, revision: row.revision, onlyFor: row.createdBy })

/** What the worker is asked for when somebody wants this negative's film. */
export function filmRequest(parts: NegativeParts, format: typeof filmFormats[number], requestId?: string): FilmRequest {
  const order = filmOrder(parts, format)
  return { studioId: parts.negative.studioId, of: { photoId: parts.photo.id }, key: renderKey(parts.photo.sha256, order), order, requestId }
}

const show = async (parts: NegativeParts): Promise<Negative> => (await showAll([parts]))[0]!

async function showAll(all: NegativeParts[]): Promise<Negative[]> {
  const keys = all.map(parts => filmFormats.map(format => filmRequest(parts, format).key))
  const rows = await rendersByKey(all[0]?.negative.studioId ?? '', keys.flat())
  return all.map((parts, i) => shown(parts, keys[i]!.map(key => rows.get(key)).filter(row => row !== undefined)))
}

function shown(parts: NegativeParts, renders: RenderRow[]): Negative {
  const { negative, photo, bench, curve, inUse } = parts
  const { studioId: _, bodyHash: __, settings, archivedAt: ___, handedInAt, createdAt, ...fields } = negative
  return {
    ...fields, ...settings,
    crop: resolveCrop(photo, settings),
    process: bench.process,
    film: filmSize(settings),
    curve: { id: curve.id, version: curve.version, calibrated: curve.calibrated },
    newerCurve: isNewer(inUse, curve) ? { id: inUse.id, version: inUse.version } : null,
    warnings: negativeWarnings(parts, renders.map(render => render.format)),
    renders: renders.map(showRender),
    handedInAt: handedInAt?.toISOString() ?? null,
    createdAt: createdAt.toISOString(),
  }
}

function isNewer(inUse: NegativeParts['inUse'], curve: NegativeParts['curve']): inUse is NonNullable<NegativeParts['inUse']> {
  if (!inUse || inUse.id === curve.id) return false
  return (inUse.inUseSince ?? new Date(0)) > (curve.inUseSince ?? curve.createdAt)
}

const withoutUndefined = <T extends object>(record: T) => Object.fromEntries(Object.entries(record).filter(([, value]) => value !== undefined)) as { [K in keyof T]: Exclude<T[K], undefined> }
