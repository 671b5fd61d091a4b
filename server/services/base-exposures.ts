import { and, eq } from 'drizzle-orm'
import { v7 as uuidv7 } from 'uuid'
import type { z } from 'zod'
import type { BaseExposure, ExposureValue } from '#shared/calibration/base-exposure'
import { ComputeError } from '#shared/errors'
import type { baseExposureBody, BaseExposureRecord, baseExposureValue } from '#shared/schemas/benches'
import { db, type Queryable, type Transaction } from '../db/client'
import { baseExposures } from '../db/schema'
import type { StudioAccess } from './access'
import { recordEvent } from './audit'
import { findBench, lockBench, type BenchRow } from './benches'
import { bodyHashOf, createOnce, idFor } from './creation'
import { guideValues } from './guide-values'
import { hint } from './hints'
import { imageChild } from './image-child'
import { keyset, toPage, type Page } from './paging'
import { requireFound } from './revisions'

type Row = typeof baseExposures.$inferSelect
type Body = z.infer<typeof baseExposureBody>

/** A dated entry; the newest counts, the ones before stay readable. */
export async function addBaseExposure(tx: Transaction, studio: StudioAccess, benchId: string, { value, unit }: z.infer<typeof baseExposureValue>): Promise<void> {
  const [row] = await tx.insert(baseExposures).values({ studioId: studio.id, id: uuidv7(), benchId, value, unit, createdBy: studio.personId }).returning()
  await tell(tx, studio, row!)
}

/** Finds the base exposure of a strip, typed in or scanned, and keeps it as the bench's newest. */
export async function createBaseExposure(studio: StudioAccess, benchId: string, body: Body): Promise<{ created: boolean, item: BaseExposureRecord }> {
  requireOpen(requireFound(await findBench(db(), studio.id, benchId)))
  const [id, bodyHash] = [idFor(body), bodyHashOf({ ...body, benchId })]
  const { values, unit } = await stripOf(studio, benchId, body)
  const goal = body.goal ?? { kind: 'full-black' }
  const stored = body.id && await find(db(), studio.id, body.id)
  const found = stored ? undefined : await imageChild().call('findBaseExposure', { values, goal })
  return await db().transaction(async (tx) => {
    requireOpen(await lockBench(tx, studio.id, benchId))
    const { created, row } = await createOnce(bodyHash, async () => found && (await tx.insert(baseExposures).values({
      studioId: studio.id, id, benchId, unit, ...inSignificantFigures(found), readingId: body.readingId,
      found: { goal, values, blackLightness: found.blackLightness, warnings: found.warnings }, bodyHash, createdBy: studio.personId,
    }).onConflictDoNothing().returning())[0], () => find(tx, studio.id, id))
    if (created) await tell(tx, studio, row)
    return { created, item: shown(row) }
  })
}

export async function listBaseExposures(studio: StudioAccess, benchId: string, page: Page) {
  requireFound(await findBench(db(), studio.id, benchId))
  const { after, order, take } = keyset(baseExposures.id, page)
  const rows = await db().select().from(baseExposures).where(and(eq(baseExposures.studioId, studio.id), eq(baseExposures.benchId, benchId), after)).orderBy(order).limit(take)
  return toPage(rows, page, shown)
}

async function stripOf(studio: StudioAccess, benchId: string, { values, readingId, unit }: Body): Promise<{ values: ExposureValue[], unit: 's' | 'dose' }> {
  if (values) return { values, unit: unit ?? 's' }
  const guide = await guideValues(db(), studio.id, benchId, readingId!, 'exposure-strip')
  return { values: guide.patches.map(({ exposure, lightness }) => ({ exposureSeconds: exposure!, lightness })), unit: guide.unit }
}

/** Four figures: a strip tells no more than two, and a second must stay a second. */
const fourFigures = (value: number): number => Number(value.toPrecision(4))
const inSignificantFigures = ({ exposureSeconds, exposureSecondsLow, exposureSecondsHigh }: BaseExposure) =>
  ({ value: fourFigures(exposureSeconds), low: fourFigures(exposureSecondsLow), high: exposureSecondsHigh && fourFigures(exposureSecondsHigh) })

function requireOpen(bench: BenchRow): void {
  if (bench.starter) throw new ComputeError('combination_fixed', 'This bench is the service’s own and rests on assumptions. Make a copy of it for your paper, film and lamp, and find its base exposure there.')
  if (bench.archivedAt) throw new ComputeError('wrong_state', 'This bench has been put away. Make a copy of it to go on.')
}

async function find(on: Queryable, studioId: string, id: string): Promise<Row | undefined> {
  return (await on.select().from(baseExposures).where(and(eq(baseExposures.studioId, studioId), eq(baseExposures.id, id))))[0]
}

async function tell(tx: Transaction, studio: StudioAccess, { id, benchId, value, unit }: Row): Promise<void> {
  await recordEvent(tx, { studioId: studio.id, userId: studio.personId, kind: 'base-exposures.created', recordId: id, details: { benchId, value, unit } })
  await hint(tx, { studioId: studio.id, topic: 'base-exposures', id })
  await hint(tx, { studioId: studio.id, topic: 'benches', id: benchId })
}

function shown({ id, value, unit, low, high, readingId, found, createdAt }: Row): BaseExposureRecord {
  const seconds = (figure: number | null): number | null => unit === 's' ? figure : null
  return {
    id, value, unit, low, high, readingId, createdAt: createdAt.toISOString(),
    exposureSeconds: seconds(value), exposureSecondsLow: seconds(low), exposureSecondsHigh: seconds(high),
    goal: found?.goal ?? null, blackLightness: found?.blackLightness ?? null, values: found?.values ?? null, warnings: found?.warnings ?? [],
  }
}
