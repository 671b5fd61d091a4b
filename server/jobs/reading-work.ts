import type { WedgePage } from '#shared/calibration/wedge/page'
import { ComputeError } from '#shared/errors'
import { readings } from '../db/schema'
import type { CallOptions } from '../image/pool'
import type { Corners, IdentifiedScan, ImageCalls } from '../image/protocol'
import { readingChild } from '../services/image-child'
import type { ReadingRow } from '../services/reading-view'
import { hintReading } from '../services/readings'
import { printOfScan } from '../services/scan-print'
import { withProfile } from '../services/scan-profile'
import { evidenceOf, paperLightnessOf, qualityOf, storedPatches, toldWarnings } from '../services/scan-result'
import { candidateWedges, wedgeOfScan } from '../services/scan-wedge'
import { storage } from '../services/storage'
import { wedgeChartOf } from '../services/wedge-charts'
import { storageKeys } from '../storage'
import type { LeasedWork } from './leased-work'
import { leasesOf } from './leases'

const leases = leasesOf(readings, hintReading)

/** Scans: first which wedge it is, by its code; then every patch of that wedge. */
export const readingWork: LeasedWork<typeof readings> = {
  noun: 'reading',
  leases,
  async work(lease, calls) {
    const { row } = lease
    const candidates = await candidateWedges(row)
    const seen = await readingChild().call('identifyScan', { path: await pathOf(row), corners: cornersOf(row), pages: await pagesOf(candidates) }, calls)
    await leases.note(lease, { fileFormat: seen.format, fileWidth: seen.width, fileHeight: seen.height })
    const { wedge, warnings } = await wedgeOfScan(row, seen.code, candidates)
    await leases.note(lease, { wedgeId: wedge.id })
    const chart = await wedgeChartOf(wedge)
    const { report, scannerProfileId, warnings: ofProfile } = await withProfile(lease.row, await readPatches(row, seen, chart, calls))
    const patches = storedPatches(chart.patches.map(({ level }) => level), report)
    await leases.commit(lease, async (tx) => {
      const print = await printOfScan(tx, { row: lease.row, wedge, page: chart.page, patches })
      return {
        patches, quality: report.quality, corners: report.corners.map(([x, y]): [number, number] => [x, y]), evidence: evidenceOf(seen, report),
        warnings: [...warnings, ...toldWarnings(report), ...ofProfile, ...print.warnings], scannerProfileId, wedgePrintId: print.wedgePrintId,
      }
    })
  },
}

const pathOf = ({ studioId, id }: ReadingRow): Promise<string> => storage().localPath(storageKeys.scan(studioId, id))
const cornersOf = ({ order }: ReadingRow): Corners | undefined => order.corners

/** Pages that differ: wedges of one grid and resolution share theirs. */
async function pagesOf(candidates: Parameters<typeof wedgeChartOf>[0][]): Promise<WedgePage[]> {
  const pages = await Promise.all(candidates.map(async wedge => (await wedgeChartOf(wedge)).page))
  return [...new Map(pages.map(page => [JSON.stringify(page), page])).values()]
}

async function readPatches(row: ReadingRow, seen: IdentifiedScan, { page, readingLevels }: Awaited<ReturnType<typeof wedgeChartOf>>, calls: Required<CallOptions>): Promise<ImageCalls['readScan']['out'] & { found: true }> {
  const quality = qualityOf(row, seen)
  const report = await readingChild().call('readScan', {
    path: await pathOf(row), page, levels: readingLevels, corners: cornersOf(row), quality, paperLightness: quality === 'scan' ? undefined : await paperLightnessOf(row),
  }, calls)
  if (!report.found) throw new ComputeError('wedge_not_found', report.warnings.map(({ message }) => message).join(' '))
  return report
}
