import type { WedgeChart } from '#shared/calibration/wedge/chart'
import type { RectMm } from '#shared/calibration/wedge/page'
import type { LevelRaster } from '#shared/calibration/wedge/paint'
import { type ChartSheet, cutLines, onSheet } from '#shared/calibration/wedge/sheet'
import { pixelsFromMm } from '#shared/sheet/pixels'
import { filmCodes } from '#shared/tone/levels'
import type { WedgeFilmOrder } from '../protocol'
import { channelsOf, codesAt, type FilmChannels, type FilmRows, inkParts, mirrorRow } from './compose'

/** An even rectangle of the film: pixels as the print reads, and its film codes. */
interface Area { x0: number, x1: number, y0: number, y1: number, codes: number[] }

/** As few channels as hold the bench's ink and the mixes of an ink trial. */
export const wedgeChannels = ({ inkColor, plan }: Pick<WedgeFilmOrder, 'inkColor' | 'plan'>): FilmChannels =>
  channelsOf([inkColor, ...plan.kind === 'ink-trial' ? plan.mixes : []])

/**
 * A wedge's sheet by a negative's formula: the chart's raster through the bench's ink, then the patches by their exact levels
 * and their own ink, lines to cut along; the whole mirrored last.
 */
export function* wedgeRows(order: WedgeFilmOrder, chart: WedgeChart, sheet: ChartSheet, raster: LevelRaster): FilmRows {
  const channels = wedgeChannels(order)
  const parts = inkParts(order.inkColor, channels)
  const levels = Float64Array.from({ length: 256 }, (_, code) => code / 255)
  const tables = parts.map(part => filmCodes(levels, part))
  const clear = codesAt(0, parts)
  const row = new Uint16Array(sheet.widthPx * channels)
  const areas = areasOf(order, chart, sheet, channels)
  for (let y = 0; y < sheet.heightPx; y++) {
    for (let i = 0; i < row.length; i++) row[i] = clear[i % channels]!
    const line = y - sheet.topPx
    if (line >= 0 && line < raster.heightPx) throughInk(raster.codes.subarray(line * raster.widthPx, (line + 1) * raster.widthPx), tables, row, sheet.leftPx)
    for (const area of areas) if (y >= area.y0 && y < area.y1) fillArea(area, row, channels)
    if (order.mirror) mirrorRow(row, channels)
    yield row
  }
}

function throughInk(codes: Uint8Array, tables: Uint16Array[], row: Uint16Array, leftPx: number): void {
  const channels = tables.length
  tables.forEach((table, channel) => {
    for (let i = 0, at = leftPx * channels + channel; i < codes.length; i++, at += channels) row[at] = table[codes[i]!]!
  })
}

function fillArea({ x0, x1, codes }: Area, row: Uint16Array, channels: number): void {
  for (let at = x0 * channels; at < x1 * channels; at++) row[at] = codes[at % channels]!
}

function areasOf(order: WedgeFilmOrder, { page, patches }: WedgeChart, sheet: ChartSheet, channels: FilmChannels): Area[] {
  const pixels = (mm: number): number => pixelsFromMm(mm, order.pixelsPerInch)
  const area = ({ xMm, yMm, widthMm, heightMm }: RectMm, level: number, inkColor: string): Area =>
    ({ x0: pixels(xMm), x1: pixels(xMm + widthMm), y0: pixels(yMm), y1: pixels(yMm + heightMm), codes: codesAt(level, inkParts(inkColor, channels)) })
  return [
    ...patches.map(({ level, inkColor }, i) => area(onSheet(sheet, page.patches[i]!), level, inkColor ?? order.inkColor)),
    ...cutLines(page, sheet).map(line => area(line, 1, order.inkColor)),
  ]
}
