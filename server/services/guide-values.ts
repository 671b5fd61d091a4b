import { and, eq } from 'drizzle-orm'
import type { ChartPatch } from '#shared/calibration/wedge/chart'
import { ComputeError } from '#shared/errors'
import type { WedgeKind } from '#shared/schemas/wedges'
import type { Queryable } from '../db/client'
import { readings, wedges } from '../db/schema'
import type { StoredPatch } from '../db/schema/readings'
import { wedgeChartOf } from './wedge-charts'
import type { WedgeRow } from './wedge-parts'

export interface ReadGuide { patches: (ChartPatch & { lightness: number })[], unit: 's' | 'dose' }

/**
 * What stands in the readable patches of a scanned guide, with their lightness. `invalid_input` unless this bench has such a
 * finished reading of a film of that kind.
 */
export async function guideValues(on: Queryable, studioId: string, benchId: string, readingId: string, kind: WedgeKind): Promise<ReadGuide> {
  const [row] = await on.select({ patches: readings.patches, state: readings.state, wedge: wedges }).from(readings)
    .leftJoin(wedges, and(eq(wedges.studioId, readings.studioId), eq(wedges.id, readings.wedgeId)))
    .where(and(eq(readings.studioId, studioId), eq(readings.benchId, benchId), eq(readings.id, readingId)))
  if (row?.state !== 'ready' || row.wedge?.kind !== kind) {
    const message = `This bench has no finished reading of ${kindSays[kind]} with this id.`
    throw new ComputeError('invalid_input', message, [{ path: 'readingId', message }])
  }
  return { patches: await withContents(on, row.wedge, row.patches), unit: row.wedge.plan.kind === 'exposure-strip' ? row.wedge.plan.strip.unit : 's' }
}

/** Patches stand in the wedge's order; those that could not be read or were set aside are left out. */
async function withContents(on: Queryable, wedge: WedgeRow, patches: StoredPatch[]): Promise<ReadGuide['patches']> {
  const chart = await wedgeChartOf(wedge, on)
  return patches.flatMap(({ lightness, used }, i) => used && lightness !== null && chart.patches[i] ? [{ ...chart.patches[i], lightness }] : [])
}

const kindSays: Record<WedgeKind, string> = {
  'scattered': 'a scattered wedge', 'numbered': 'a numbered wedge', 'ink-trial': 'an ink trial', 'ink-load': 'an ink load check', 'exposure-strip': 'an exposure strip', 'step-tablet': 'a step tablet',
}
