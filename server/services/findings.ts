import { and, eq } from 'drizzle-orm'
import { evidenceSays, findCauses, type LightSlope } from '#shared/calibration/causes'
import type { Warning } from '#shared/schemas/curves'
import type { Findings } from '#shared/schemas/findings'
import { db } from '../db/client'
import { benches, readings, wedges } from '../db/schema'
import type { StudioAccess } from './access'
import { findCurve } from './curves'
import { evennessOfReading, newestPrints } from './evenness'
import { imageChild } from './image-child'
import { diagnosticPlaces, placedPatches } from './reading-places'
import type { ReadingRow } from './reading-view'
import { requireFound } from './revisions'
import { wedgeChartOf } from './wedge-charts'
import type { WedgeRow } from './wedge-parts'

/** So many prints of a bench are asked for a fall-off of light that they share. */
const printsAsked = 4

/** What a reading tells besides its patches. Typed values tell nothing more than themselves. */
export async function findingsOf(studio: StudioAccess, readingId: string): Promise<Findings> {
  const [row] = await db().select({ reading: readings, wedge: wedges, channel: benches.readingChannel }).from(readings)
    .innerJoin(benches, and(eq(benches.studioId, readings.studioId), eq(benches.id, readings.benchId)))
    .leftJoin(wedges, and(eq(wedges.studioId, readings.studioId), eq(wedges.id, readings.wedgeId)))
    .where(and(eq(readings.studioId, studio.id), eq(readings.id, readingId)))
  const { reading, wedge, channel } = requireFound(row)
  if (reading.state !== 'ready' || !wedge) return { causes: [], evenness: null, check: null, inkTrial: null, warnings: [] }
  const [evenness, check, inkTrial, causes] = await Promise.all([
    evennessOfReading(db(), reading, wedge), checkOf(studio, reading, wedge, channel === 'lightness'), inkTrialOf(reading, wedge), causesOf(studio, reading),
  ])
  return { causes, evenness, check: check.found, inkTrial, warnings: check.warnings }
}

async function causesOf(studio: StudioAccess, { evidence, benchId }: ReadingRow): Promise<Findings['causes']> {
  if (!evidence) return []
  const prints = await newestPrints(db(), studio.id, benchId, printsAsked)
  const evennesses = await Promise.all(prints.map(({ reading, wedge }) => evennessOfReading(db(), reading, wedge)))
  const lightSlopes = evennesses.flatMap((evenness): LightSlope[] => evenness ? [evenness.light] : [])
  const edge = evidence.edgeWidthMm === null ? null : { widthMm: evidence.edgeWidthMm, pixelsPerMm: evidence.pixelsPerInch / 25.4 }
  return findCauses({ places: diagnosticPlaces(evidence), edge, isMirrored: evidence.mirrored && !evidence.inverted, lightSlopes })
    .map(cause => ({ ...cause, evidence: evidenceSays(cause.evidence) }))
}

/** Against the aim between the curve's own ends; only where the bench is read in lightness. */
async function checkOf(studio: StudioAccess, reading: ReadingRow, wedge: WedgeRow, isInLightness: boolean): Promise<{ found: Findings['check'], warnings: Warning[] }> {
  const curve = wedge.throughCurveId ? await findCurve(db(), studio.id, wedge.throughCurveId) : undefined
  if (!curve) return { found: null, warnings: [] }
  if (!isInLightness) return { found: null, warnings: [{ code: 'check_in_lightness_only', message: 'A curve of a bench that is read in a density or along its colours is not checked by this wedge yet; fit its reading as a curve of its own instead.' }] }
  const patches = placedPatches(await wedgeChartOf(wedge, db()), reading.patches).flatMap(({ tone, level: _, deviation: __, ...patch }) => tone === undefined ? [] : [{ ...patch, tone }])
  return { found: await imageChild().call('checkCurve', { patches, curve: { aim: curve.aim, black: curve.response[0]!, white: curve.response.at(-1)! } }), warnings: [] }
}

async function inkTrialOf(reading: ReadingRow, wedge: WedgeRow): Promise<Findings['inkTrial']> {
  if (wedge.plan.kind !== 'ink-trial') return null
  const { mixes: names } = wedge.plan
  const patches = placedPatches(await wedgeChartOf(wedge, db()), reading.patches).map(({ inkColor, level, lightness, deviation }) => ({ mix: names.indexOf(inkColor!), level, lightness, deviation }))
  const foilLightness = reading.evidence?.diagnostics.foil?.lightness
  const { paperLightness, mixes, recommended, why } = await imageChild().call('readInkTrial', { patches, names, foilLightness })
  return { paperLightness, mixes: mixes.map(({ mix, ...figures }) => ({ inkColor: names[mix]!, ...figures })), recommended: recommended === null ? null : names[recommended]!, why }
}
