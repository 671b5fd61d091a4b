import QRCode from 'qrcode'
import type { WedgeChart } from '#shared/calibration/wedge/chart'
import { formatIdentity } from '#shared/calibration/wedge/identity-code'
import { type PageLabel, labelPoints } from '#shared/calibration/wedge/page'
import { type LevelRaster, paintWedge, stampCoverage } from '#shared/calibration/wedge/paint'
import { pixelsFromMm } from '#shared/sheet/pixels'
import type { WedgeFilmOrder } from '../protocol'
import { drawText } from './text-mask'

/** A line that is too long for its place is set smaller, down to this. */
const leastPoints = 3

/** The chart's page as it reads, with its code and its text; `levels` stand in its patches, rounded to 8 bits. */
export async function paintChart({ page }: WedgeChart, levels: ArrayLike<number>, order: Pick<WedgeFilmOrder, 'code' | 'lines'>): Promise<LevelRaster> {
  const raster = paintWedge(page, levels, identityModules(order.code), page.pixelsPerInch!)
  for (const label of page.labels) await stampLabel(raster, label, textOf(label, order))
  return raster
}

/** The code's 21 × 21 modules by rows, 1 dark: QR code version 1-H (ISO/IEC 18004). */
export const identityModules = (code: string): Uint8Array =>
  QRCode.create([{ data: code, mode: 'alphanumeric' }], { version: 1, errorCorrectionLevel: 'H' }).modules.data

function textOf({ id, text }: PageLabel, { code, lines }: Pick<WedgeFilmOrder, 'code' | 'lines'>): string {
  if (id === 'code') return formatIdentity(code)
  return id === 'bench' ? lines.join(' · ') : text ?? ''
}

async function stampLabel(raster: LevelRaster, { place, ink }: PageLabel, text: string): Promise<void> {
  if (!text.trim()) return
  const room = pixelsFromMm(place.widthMm, raster.pixelsPerInch)
  const points = labelPoints(place)
  const drawn = await drawText(text, points, raster.pixelsPerInch)
  const { width, height, coverage } = drawn.width <= room ? drawn : await drawText(text, Math.max(leastPoints, points * room / drawn.width), raster.pixelsPerInch)
  stampCoverage(raster, place, ink, { widthPx: width, heightPx: height, coverage })
}
