import { chartOf, type WedgeChart } from '#shared/calibration/wedge/chart'
import { curveLevels } from '#shared/tone/levels'
import { db, type Queryable } from '../db/client'
import { requireWedgeParts, type WedgeParts, type WedgeRow } from './wedge-parts'

/** By code, which no two wedges share. Laying out takes a tenth of a second, and neither a wedge's plan nor its curve ever changes. */
const kept = new Map<string, WedgeChart>()
const keptMax = 64

/** A wedge as it was laid out when it was made. */
export async function wedgeChartOf(row: WedgeRow, on: Queryable = db()): Promise<WedgeChart> {
  return kept.get(row.code) ?? chartOfParts(row.throughCurveId ? await requireWedgeParts(row.studioId, row.id, on) : { wedge: row, curve: null })
}

/** The same, where the curve is at hand. */
export function chartOfParts(parts: Pick<WedgeParts, 'wedge' | 'curve'>): WedgeChart {
  const { code, plan, pixelsPerInch } = parts.wedge
  const chart = kept.get(code) ?? chartOf(plan, pixelsPerInch, throughCurveOf(parts))
  if (!kept.has(code) && kept.size >= keptMax) kept.delete(kept.keys().next().value!)
  kept.set(code, chart)
  return chart
}

/** Ink levels at 1025 equal steps of tone, or null for a wedge of plain levels. */
export const throughCurveOf = ({ curve }: Pick<WedgeParts, 'curve'>): number[] | null => curve && Array.from(curveLevels(curve.response, curve.aim))
