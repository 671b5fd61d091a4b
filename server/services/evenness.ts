import { and, desc, eq } from 'drizzle-orm'
import type { Evenness } from '#shared/calibration/evenness'
import type { Queryable } from '../db/client'
import { readings, wedges } from '../db/schema'
import { imageChild } from './image-child'
import { placedPatches } from './reading-places'
import type { ReadingRow } from './reading-view'
import { wedgeChartOf } from './wedge-charts'
import type { WedgeRow } from './wedge-parts'

/** Fewer readable patches tell nothing of evenness. */
const leastPatches = 60
/** By reading and when it was read; a reading may be read again. */
const kept = new Map<string, Promise<Evenness>>()
const keptMax = 200

/** How evenly the print of a scattered wedge came out; null for other readings. */
export async function evennessOfReading(on: Queryable, reading: ReadingRow, wedge: WedgeRow | null): Promise<Evenness | null> {
  if (reading.state !== 'ready' || wedge?.kind !== 'scattered') return null
  const patches = placedPatches(await wedgeChartOf(wedge, on), reading.patches)
  if (patches.length < leastPatches) return null
  const key = `${reading.id} ${reading.readyAt?.getTime() ?? 0}`
  const found = kept.get(key) ?? imageChild().call('evenness', { patches })
  if (!kept.has(key) && kept.size >= keptMax) kept.delete(kept.keys().next().value!)
  kept.set(key, found)
  found.catch(() => kept.delete(key))
  return await found
}

/** The newest scanned prints of a bench's scattered wedges, one reading a print. */
export async function newestPrints(on: Queryable, studioId: string, benchId: string, count: number): Promise<{ reading: ReadingRow, wedge: WedgeRow }[]> {
  const rows = await on.select({ reading: readings, wedge: wedges }).from(readings)
    .innerJoin(wedges, and(eq(wedges.studioId, readings.studioId), eq(wedges.id, readings.wedgeId)))
    .where(and(eq(readings.studioId, studioId), eq(readings.benchId, benchId), eq(readings.state, 'ready'), eq(wedges.kind, 'scattered')))
    .orderBy(desc(readings.id)).limit(4 * count)
  const prints = new Set<string>()
  return rows.filter(({ reading }) => {
    const print = reading.wedgePrintId ?? reading.id
    return !prints.has(print) && prints.add(print)
  }).slice(0, count)
}
