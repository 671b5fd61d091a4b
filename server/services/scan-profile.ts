import { and, eq } from 'drizzle-orm'
import type { PatchReading } from '#shared/calibration/reading/correction'
import { correctPatch, type ScannerProfile } from '#shared/calibration/scanner-profile'
import type { Warning } from '#shared/schemas/curves'
import { db } from '../db/client'
import { benches } from '../db/schema'
import type { ImageCalls } from '../image/protocol'
import type { ReadingRow } from './reading-view'
import { profileFor } from './scanner-profiles'

type Report = ImageCalls['readScan']['out'] & { found: true }
export interface ProfiledReport { report: Report, scannerProfileId: string | null, warnings: Warning[] }

/** Share of the patches beyond a profile's points from which on it is said. */
const toldShare = 0.02

/**
 * A flatbed's reading with the tone that its scanner was taught for this process. Phone pictures and scans without a named
 * scanner or a profile stay as they are.
 */
export async function withProfile({ studioId, benchId, scannerId }: ReadingRow, report: Report): Promise<ProfiledReport> {
  const found = scannerId && report.quality === 'scan' ? await profileOf(studioId, benchId, scannerId) : undefined
  if (!found) return { report, scannerProfileId: null, warnings: [] }
  const { id, profile } = found
  const correct = (patch: PatchReading | null): PatchReading | null => patch && correctPatch(profile, patch)
  const { foil, bare, uncoated } = report.diagnostics
  const corrected: Report = {
    ...report,
    patches: report.patches.map(correct),
    references: report.references.map(({ fullInk, clear }) => ({ fullInk: correct(fullInk), clear: correct(clear) })),
    diagnostics: { foil: correct(foil), bare: correct(bare), uncoated: correct(uncoated) },
  }
  return { report: corrected, scannerProfileId: id, warnings: outsideWarnings(profile, report.patches) }
}

async function profileOf(studioId: string, benchId: string, scannerId: string) {
  const [bench] = await db().select({ process: benches.process }).from(benches).where(and(eq(benches.studioId, studioId), eq(benches.id, benchId)))
  return bench && await profileFor(db(), studioId, scannerId, bench.process)
}

function outsideWarnings(profile: ScannerProfile, patches: readonly (PatchReading | null)[]): Warning[] {
  const outside = patches.filter(patch => patch !== null && profile.correct(patch.lightness).isOutside).length
  if (outside <= toldShare * patches.length) return []
  return [{ code: 'beyond_profile', message: `${outside} of ${patches.length} patches lie beyond the greys that the scanner was taught (L* ${profile.from.toFixed(0)} to ${profile.to.toFixed(0)}); there its correction is a guess. Teach it darker and lighter greys.` }]
}
