import { chartOf } from '#shared/calibration/wedge/chart'
import { placeOnSheet } from '#shared/calibration/wedge/sheet'
import { paintChart } from '../film/wedge-raster'
import { wedgeChannels, wedgeRows } from '../film/wedge-rows'
import { writeFilm } from '../film/write-film'
import type { ImageCalls } from '../protocol'

/** The film file of a wedge, laid out again from its record and written as a negative's is. */
export async function makeWedgeFilm({ target, order, renderKey }: ImageCalls['wedgeFilm']['in'], onProgress: (fraction: number) => void): Promise<ImageCalls['wedgeFilm']['out']> {
  const { format, page, pixelsPerInch } = order
  const chart = chartOf(order.plan, pixelsPerInch, order.throughCurve)
  const sheet = placeOnSheet(chart.page, page, pixelsPerInch)
  const raster = await paintChart(chart, chart.patches.map(patch => patch.level), order)
  const spec = {
    width: sheet.widthPx, height: sheet.heightPx, channels: wedgeChannels(order), pixelsPerInch,
    pageMm: { width: page.widthMm, height: page.heightMm }, title: order.title, renderKey,
  }
  return writeFilm(target, format, wedgeRows(order, chart, sheet, raster), spec, done => onProgress(done / sheet.heightPx))
}
