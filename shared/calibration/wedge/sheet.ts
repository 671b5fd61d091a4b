import { ComputeError } from '../../errors'
import { mmFromPixels, pixelsFromMm } from '../../sheet/pixels'
import type { SizeMm } from '../../sheet/sizes'
import type { RectMm, WedgePage } from './page'
import { rect } from './page'

/** Where a chart lies on its film sheet; whole pixels of the film file, as the print reads. */
export interface ChartSheet {
  widthMm: number, heightMm: number
  widthPx: number, heightPx: number
  leftPx: number, topPx: number
  leftMm: number, topMm: number
}

/** Bare film above a chart at most, mm: what is below stays in one piece and can be used for something else. */
const aboveMm = 10
/** Lines that say where to cut: their distance from the chart, length and width, mm. */
const [awayMm, cutMm, lineMm] = [1, 3, 0.25]

/** What inkjets leave unprinted along a sheet's edges, mm (common practice). */
const inkjetMarginMm = 3
/** A sheet this much larger at most is cut for the chart, mm. */
const exactMm = 0.5

/** Room around a chart: `ample` leaves the inkjet's margin, `exact` is a film cut for it, `tight` is in between. */
interface WayToLie extends SizeMm { room: 'ample' | 'exact' | 'tight' }

/** The ways round that a sheet can lie for a chart, the better first: as asked before turned where both are as good. */
export function waysToLie(page: SizeMm, { widthMm, heightMm }: SizeMm): WayToLie[] {
  const ways = [{ widthMm, heightMm }, { widthMm: heightMm, heightMm: widthMm }].flatMap((sheet): WayToLie[] => {
    const [across, down] = [sheet.widthMm - page.widthMm, sheet.heightMm - page.heightMm]
    const [least, most] = [Math.min(across, down), Math.max(across, down)]
    if (least < -1e-6) return []
    return [{ ...sheet, room: most <= exactMm ? 'exact' : least >= 2 * inkjetMarginMm ? 'ample' : 'tight' }]
  })
  return [...ways.filter(way => way.room !== 'tight'), ...ways.filter(way => way.room === 'tight')]
}

/**
 * The sheet as it has to lie for a chart: as asked, or on its other side where the chart fits better so.
 * @throws ComputeError `invalid_input` when it fits neither way.
 */
export function sheetFor(page: SizeMm, asked: SizeMm): SizeMm {
  const [way] = waysToLie(page, asked)
  if (!way) {
    throw new ComputeError('invalid_input', `This takes ${page.widthMm} × ${page.heightMm} mm of film; ${asked.widthMm} × ${asked.heightMm} mm is too small for it.`,
      [{ path: 'page', message: `At least ${page.widthMm} × ${page.heightMm} mm.` }])
  }
  return { widthMm: way.widthMm, heightMm: way.heightMm }
}

/**
 * The film file is the whole sheet, so that it prints at 100 % without a choice of place or scale; the chart stands on it in the
 * middle of the width and near the top.
 */
export function placeOnSheet(page: WedgePage, sheet: SizeMm, pixelsPerInch: number): ChartSheet {
  const pixels = (mm: number): number => pixelsFromMm(mm, pixelsPerInch)
  const [widthPx, heightPx] = [pixels(sheet.widthMm), pixels(sheet.heightMm)]
  const [slackX, slackY] = [Math.max(0, widthPx - pixels(page.widthMm)), Math.max(0, heightPx - pixels(page.heightMm))]
  const [leftPx, topPx] = [slackX >> 1, Math.min(pixels(aboveMm), slackY >> 1)]
  return { ...sheet, widthPx, heightPx, leftPx, topPx, leftMm: mmFromPixels(leftPx, pixelsPerInch), topMm: mmFromPixels(topPx, pixelsPerInch) }
}

/** A place of the chart's page on the sheet. */
export const onSheet = ({ leftMm, topMm }: ChartSheet, { xMm, yMm, widthMm, heightMm }: RectMm): RectMm => rect(xMm + leftMm, yMm + topMm, widthMm, heightMm)

/** Lines outside the chart's corners along its edges, where the sheet has room for them: there the film is cut. */
export function cutLines(page: SizeMm, sheet: ChartSheet): RectMm[] {
  const [left, top] = [sheet.leftMm, sheet.topMm]
  const [right, bottom] = [left + page.widthMm, top + page.heightMm]
  const reach = awayMm + cutMm
  const lines = [
    ...[top, bottom].flatMap(y => [rect(left - reach, y - lineMm / 2, cutMm, lineMm), rect(right + awayMm, y - lineMm / 2, cutMm, lineMm)]),
    ...[left, right].flatMap(x => [rect(x - lineMm / 2, top - reach, lineMm, cutMm), rect(x - lineMm / 2, bottom + awayMm, lineMm, cutMm)]),
  ]
  return lines.filter(({ xMm, yMm, widthMm, heightMm }) => xMm >= 0 && yMm >= 0 && xMm + widthMm <= sheet.widthMm && yMm + heightMm <= sheet.heightMm)
}
