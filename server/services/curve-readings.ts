import { and, eq, inArray } from 'drizzle-orm'
import type { CurveFit, CurveReading } from '#shared/calibration/curve-fit'
import { ComputeError } from '#shared/errors'
import { db } from '../db/client'
import { readings, wedges } from '../db/schema'
import type { BenchRow } from './benches'
import { canonicalJson } from './creation'
import { imageChild } from './image-child'

/**
 * The fit of a bench's readings, made in a child. Scans of one wedge print are one sample; typed values count as a print of
 * their own each.
 * @throws ComputeError `invalid_input` for a reading that is not this bench's, is not done or is of no step wedge.
 */
export async function fitOfReadings(bench: BenchRow, readingIds: string[]): Promise<CurveFit> {
  const rows = await rowsOf(bench, readingIds)
  const issues = readingIds.flatMap((id, i) => {
    const row = rows.find(row => row.reading.id === id)
    if (row?.reading.state !== 'ready') return [{ path: `readingIds.${i}`, message: 'This bench has no such finished reading.' }]
    return isOfSteps(row) ? [] : [{ path: `readingIds.${i}`, message: 'This reading is of a guide or an ink trial, which tells no curve.' }]
  })
  if (issues.length) throw new ComputeError('invalid_input', 'A curve is fitted from readings of its own bench.', issues)
  return await imageChild().call('fitCurve', { readings: rows.map(row => curveReading(bench, row)), channel: bench.readingChannel })
}

type Row = Awaited<ReturnType<typeof rowsOf>>[number]

async function rowsOf(bench: BenchRow, readingIds: string[]) {
  return await db().select({
    reading: { id: readings.id, state: readings.state, quality: readings.quality, patches: readings.patches, evidence: readings.evidence, wedgePrintId: readings.wedgePrintId },
    wedge: { plan: wedges.plan, path: wedges.path, inkColor: wedges.inkColor },
  }).from(readings).leftJoin(wedges, and(eq(wedges.studioId, readings.studioId), eq(wedges.id, readings.wedgeId)))
    .where(and(eq(readings.studioId, bench.studioId), eq(readings.benchId, bench.id), inArray(readings.id, readingIds)))
}

const isOfSteps = ({ wedge }: Row): boolean => wedge === null || wedge.plan.kind === 'scattered' || wedge.plan.kind === 'numbered'

function curveReading(bench: BenchRow, { reading, wedge }: Row): CurveReading {
  const places = reading.evidence?.diagnostics
  return {
    print: reading.wedgePrintId ?? reading.id, quality: reading.quality, patches: reading.patches,
    grid: wedge?.plan.kind === 'scattered' ? wedge.plan.grid : null,
    places: places ? { bare: places.bare?.lightness ?? null, foil: places.foil?.lightness ?? null, uncoated: places.uncoated?.lightness ?? null } : null,
    isOtherPath: wedge !== null && (wedge.inkColor !== bench.ink.color || canonicalJson(wedge.path) !== canonicalJson(bench.path)),
  }
}
