import { and, desc, eq } from 'drizzle-orm'
import type { z } from 'zod'
import { ninetyPercentSays, readTablet, targetStep, type TabletPrint, type TabletStep } from '#shared/calibration/step-tablet'
import { ComputeError } from '#shared/errors'
import type { Tablet, tabletBody } from '#shared/schemas/calibration'
import { db, type Queryable } from '../db/client'
import { baseExposures, tablets } from '../db/schema'
import type { StudioAccess } from './access'
import { recordEvent } from './audit'
import { findBench, lockBench } from './benches'
import { bodyHashOf, createOnce, idFor } from './creation'
import { guideValues } from './guide-values'
import { hint } from './hints'
import { keyset, toPage, type Page } from './paging'
import { requireFound } from './revisions'

export type TabletRow = typeof tablets.$inferSelect
type Body = z.infer<typeof tabletBody>

export async function listTablets(studio: StudioAccess, benchId: string, page: Page) {
  requireFound(await findBench(db(), studio.id, benchId))
  const { after, order, take } = keyset(tablets.id, page)
  const rows = await db().select().from(tablets).where(and(eq(tablets.studioId, studio.id), eq(tablets.benchId, benchId), after)).orderBy(order).limit(take)
  return toPage(rows, page, shown)
}

export async function findTablet(on: Queryable, studioId: string, benchId: string, id: string): Promise<TabletRow | undefined> {
  return (await on.select().from(tablets).where(and(eq(tablets.studioId, studioId), eq(tablets.benchId, benchId), eq(tablets.id, id))))[0]
}

/** Keeps a contact-printed step tablet with what it says of this bench's paper. */
export async function createTablet(studio: StudioAccess, benchId: string, body: Body): Promise<{ created: boolean, item: Tablet }> {
  requireFound(await findBench(db(), studio.id, benchId))
  const [id, bodyHash] = [idFor(body), bodyHashOf({ ...body, benchId })]
  const values = await stepsOf(studio, benchId, body)
  const print = readTablet(values)
  return await db().transaction(async (tx) => {
    if ((await lockBench(tx, studio.id, benchId)).archivedAt) throw new ComputeError('wrong_state', 'This bench has been put away. Make a copy of it to go on.')
    const { created, row } = await createOnce(bodyHash, async () => (await tx.insert(tablets).values({
      studioId: studio.id, id, benchId, readingId: body.readingId, values, exposureValue: body.exposure?.value, exposureUnit: body.exposure?.unit,
      result: resultOf(print, await targetStepFor(tx, studio.id, benchId, body.exposure, print, values)), bodyHash, createdBy: studio.personId,
    }).onConflictDoNothing().returning())[0], async () => (await tx.select().from(tablets).where(and(eq(tablets.studioId, studio.id), eq(tablets.id, id))))[0])
    if (created) {
      await recordEvent(tx, { studioId: studio.id, userId: studio.personId, kind: 'tablets.created', recordId: id, details: { benchId, steps: values.length } })
      await hint(tx, { studioId: studio.id, topic: 'tablets', id })
    }
    return { created, item: shown(row) }
  })
}

async function stepsOf(studio: StudioAccess, benchId: string, { values, readingId }: Body): Promise<TabletStep[]> {
  return values ?? (await guideValues(db(), studio.id, benchId, readingId!, 'step-tablet')).patches.map(({ density, lightness }) => ({ density: density!, lightness }))
}

/** Needs to know how long the tablet was exposed, and a base exposure in the same unit. */
async function targetStepFor(on: Queryable, studioId: string, benchId: string, exposure: Body['exposure'], print: TabletPrint, values: readonly TabletStep[]): Promise<number | null> {
  if (!exposure) return null
  const [base] = await on.select().from(baseExposures)
    .where(and(eq(baseExposures.studioId, studioId), eq(baseExposures.benchId, benchId), eq(baseExposures.unit, exposure.unit))).orderBy(desc(baseExposures.id)).limit(1)
  const densities = [...new Set(values.map(v => v.density))].sort((a, b) => a - b)
  return base ? targetStep(print, densities, exposure.value, base.value)?.step ?? null : null
}

const resultOf = (print: TabletPrint, target: number | null): TabletRow['result'] => ({
  exposureScale: print.exposureScale, isoRange: print.isoRange, isoSays: ninetyPercentSays[print.ninetyPercentOf],
  maxDensity: print.maxDensity, paperDensity: print.paperDensity, targetStep: target, fullBlackDensity: print.fullBlackDensity, warnings: print.warnings,
})

const shown = ({ id, benchId, readingId, values, result, exposureValue, exposureUnit, createdAt }: TabletRow): Tablet =>
  ({ id, benchId, readingId, values, ...result, exposure: exposureValue !== null && exposureUnit ? { value: exposureValue, unit: exposureUnit } : null, createdAt: createdAt.toISOString() })
