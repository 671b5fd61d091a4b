import { and, desc, eq, isNotNull } from 'drizzle-orm'
import type { PatchReading } from '#shared/calibration/reading/correction'
import type { Reading, ReadingEvidence, Warning } from '#shared/schemas/curves'
import { db } from '../db/client'
import { readings, type StoredPatch } from '../db/schema'
import type { IdentifiedScan, ImageCalls } from '../image/protocol'
import type { ReadingRow } from './reading-view'

type Report = ImageCalls['readScan']['out'] & { found: true }

/** Half a patch and more under dust and spots says nothing of the rest. */
const greatestRejectedShare = 0.5

/** The levels are those of the wedge's record; where tones follow from something else, what stands on the film. */
export const storedPatches = (levels: number[], { patches }: Report): StoredPatch[] => patches.map((patch, i) => ({
  level: levels[i]!, lightness: patch?.lightness ?? null, lab: patch?.lab ?? null, deviation: patch?.deviation ?? null,
  used: patch !== null && patch.rejectedShare <= greatestRejectedShare,
}))

export function evidenceOf({ width, height, code }: IdentifiedScan, report: Report): ReadingEvidence {
  const { pixelsPerMm, turnedDegrees, mirrored, inverted, markersSeen, edgeWidthMm, glareShare, references, diagnostics: { foil, bare, uncoated }, cells } = report
  return {
    picture: { width, height }, code, pixelsPerInch: pixelsPerMm * 25.4, turnedDegrees, mirrored, inverted, markersSeen, glareShare,
    edgeWidthMm: Number.isFinite(edgeWidthMm) ? edgeWidthMm : null,
    references: references.map(({ fullInk, clear }) => ({ fullInk: place(fullInk), clear: place(clear) })),
    diagnostics: { foil: place(foil), bare: place(bare), uncoated: place(uncoated) },
    cells: cells.map(corners => corners.flatMap(([x, y]) => [Math.round(10 * x) / 10, Math.round(10 * y) / 10])),
  }
}

const place = (patch: PatchReading | null) => patch && { lightness: patch.lightness, lab: patch.lab, deviation: patch.deviation }

export const toldWarnings = (report: Pick<Report, 'warnings'>): Warning[] => report.warnings.map(({ code, message }) => ({ code, message }))

/** What the picture was taken with: what the person says, else what the file says; else its geometry will tell. */
export const qualityOf = ({ order }: ReadingRow, { device }: IdentifiedScan): Exclude<Reading['quality'], 'measured'> | undefined =>
  order.quality ?? (device === 'camera' ? 'phone' : device === 'scanner' ? 'scan' : undefined)

/** L* of the bare paper for a phone picture: given, or what the last flatbed scan on this bench read under full ink. */
export async function paperLightnessOf(row: ReadingRow): Promise<number | undefined> {
  if (row.order.paperLightness !== undefined) return row.order.paperLightness
  const [last] = await db().select({ evidence: readings.evidence }).from(readings)
    .where(and(eq(readings.studioId, row.studioId), eq(readings.benchId, row.benchId), eq(readings.state, 'ready'), eq(readings.quality, 'scan'), isNotNull(readings.evidence)))
    .orderBy(desc(readings.id)).limit(1)
  const whites = last?.evidence?.references.flatMap(({ fullInk }) => fullInk?.lightness ?? []) ?? []
  return whites.length === 0 ? undefined : whites.reduce((sum, white) => sum + white, 0) / whites.length
}
