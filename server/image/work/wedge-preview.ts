import sharp from 'sharp'
import { chartOf, type ChartPatch } from '#shared/calibration/wedge/chart'
import { cutLines, placeOnSheet } from '#shared/calibration/wedge/sheet'
import { pixelsFromMm } from '#shared/sheet/pixels'
import { lookColour, type PaletteKind } from '#shared/tone/palettes'
import { paintChart } from '../film/wedge-raster'
import type { ImageCalls } from '../protocol'

/** Drawn at this resolution and made smaller, so that fine parts keep their weight; fewer where the sheet is large. */
const drawnPixelsPerInch = 300
const drawnMaxPixels = 12_000_000
/** Tones of a print that nobody has measured yet, L*: a look only. */
const [deepest, paper] = [20, 95]

/** The sheet as its print may read: in the process's colours, unmirrored. Guides are shown as if their steps gave even tones. */
export async function makeWedgePreview({ target, order, width, palette }: ImageCalls['wedgePreview']['in']): Promise<ImageCalls['wedgePreview']['out']> {
  const { widthMm, heightMm } = order.page
  const pixelsPerInch = Math.min(order.pixelsPerInch, drawnPixelsPerInch, Math.sqrt(drawnMaxPixels / (widthMm * heightMm)) * 25.4)
  const chart = chartOf(order.plan, pixelsPerInch, order.throughCurve)
  const sheet = placeOnSheet(chart.page, order.page, pixelsPerInch)
  const raster = await paintChart(chart, shownLevels(chart.patches), order)
  const codes = new Uint8Array(sheet.widthPx * sheet.heightPx)
  for (let y = 0; y < raster.heightPx; y++) {
    codes.set(raster.codes.subarray(y * raster.widthPx, (y + 1) * raster.widthPx), (y + sheet.topPx) * sheet.widthPx + sheet.leftPx)
  }
  for (const { xMm, yMm, widthMm: w, heightMm: h } of cutLines(chart.page, sheet)) {
    for (let y = pixelsFromMm(yMm, pixelsPerInch); y < pixelsFromMm(yMm + h, pixelsPerInch); y++) {
      codes.fill(255, y * sheet.widthPx + pixelsFromMm(xMm, pixelsPerInch), y * sheet.widthPx + pixelsFromMm(xMm + w, pixelsPerInch))
    }
  }
  const height = Math.max(1, Math.round(width * heightMm / widthMm))
  await sharp(colours(codes, palette as PaletteKind), { raw: { width: sheet.widthPx, height: sheet.heightPx, channels: 3 } })
    .resize(width, height, { fit: 'fill' }).png({ compressionLevel: 6 }).toFile(target)
  return { width, height }
}

/** Ink levels; where exposures or a tablet's densities make the tones, their place among each other instead. */
function shownLevels(patches: ChartPatch[]): number[] {
  const [longest, densest] = [Math.max(...patches.map(p => p.exposure ?? 0)), Math.max(...patches.map(p => p.density ?? 0))]
  const shortest = Math.min(...patches.map(p => p.exposure ?? Infinity))
  return patches.map(({ level, exposure, density }) => {
    if (exposure !== undefined) return Math.log(longest / exposure) / Math.log(longest / shortest)
    return density === undefined ? level : density / densest
  })
}

function colours(codes: Uint8Array, palette: PaletteKind): Uint8Array {
  const table = Array.from({ length: 256 }, (_, code) => lookColour(palette, deepest + (paper - deepest) * code / 255))
  const rgb = new Uint8Array(3 * codes.length)
  for (let i = 0, at = 0; i < codes.length; i++, at += 3) {
    const colour = table[codes[i]!]!
    rgb[at] = colour[0]
    rgb[at + 1] = colour[1]
    rgb[at + 2] = colour[2]
  }
  return rgb
}
