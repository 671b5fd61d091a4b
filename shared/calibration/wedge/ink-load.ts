import { mmFromPixels, pixelsFromMm } from '../../sheet/pixels'
import type { WedgeGrid } from '../wedge-layout'
import { guidePage } from './guide-frame'
import type { Ground, PageLabel, RectMm, WedgePage } from './page'
import { labelPlaceMm, rect } from './page'

/** Loads that are tried, in hundredths of full ink. */
const loadsPercent = [100, 95, 90, 80, 70, 60]
/** When each strip is wiped, minutes after the film came out of the inkjet. */
const wipeMinutes = [5, 10, 20, 30, 60]
/** Widths of the fine lines, pixels of the film; five lines each, with gaps as wide as three. */
const linePixels = [1, 2, 3, 4, 6]
const linesOfAWidth = 5
const gapWidths = 3
const textPoints = [4, 5, 6, 8]
const sampleText = 'Quay 0258 aegs'
const [labelMm, apartMm] = [3, 2]
/** Where the four parts begin, shares of the field's height. */
const parts = { loads: 0, lines: 0.32, text: 0.56, wipes: 0.77 }

/** Ink levels of the check's fields: the loads, then a strip of full ink for each wipe; 8-bit codes. */
export const inkLoadLevels = (): number[] => [...loadsPercent.map(percent => Math.round(255 * percent / 100) / 255), ...wipeMinutes.map(() => 1)]

/**
 * The check of ink load and drying, judged by hand and eye: fields of full and nearly full ink; fine lines, clear in ink and
 * ink in clear film; small text in both; strips to wipe after 5, 10, 20, 30 and 60 minutes. `patches` are fields and strips, in
 * the order of `inkLoadLevels`. Lines are whole pixels of a film of `pixelsPerInch`.
 */
export function inkLoadPage(grid: WedgeGrid, pixelsPerInch: number): WedgePage {
  return guidePage(grid, (field) => {
    const at = (from: number, to: number): RectMm => rect(field.xMm, field.yMm + from * field.heightMm, field.widthMm, (to - from) * field.heightMm)
    const loads = labelledFields('load', at(parts.loads, parts.lines), loadsPercent.map(percent => `${percent} %`))
    const wipes = labelledFields('wipe', at(parts.wipes, 1), wipeMinutes.map(minutes => `wipe at ${minutes} min`))
    const lines = fineLines(at(parts.lines, parts.text), pixelsPerInch)
    const text = smallText(at(parts.text, parts.wipes))
    return {
      columns: loadsPercent.length, rows: 2, patches: [...loads.fields, ...wipes.fields],
      grounds: [...lines.grounds, ...text.grounds], labels: [...loads.labels, ...wipes.labels, ...lines.labels, ...text.labels],
    }
  })
}

/** Fields side by side, each with its word above it. */
function labelledFields(id: string, area: RectMm, words: string[]): { fields: RectMm[], labels: PageLabel[] } {
  const pitch = area.widthMm / words.length
  return {
    fields: words.map((_, i) => rect(area.xMm + i * pitch, area.yMm + labelMm + 0.5, pitch - apartMm, area.heightMm - labelMm - 0.5 - apartMm)),
    labels: words.map((text, i) => ({ id: `${id}-${i}`, place: rect(area.xMm + i * pitch, area.yMm, pitch - apartMm, labelMm), ink: 'full', text })),
  }
}

const halves = (area: RectMm): { left: RectMm, right: RectMm } => ({
  left: rect(area.xMm, area.yMm, area.widthMm / 2 - apartMm, area.heightMm - apartMm),
  right: rect(area.xMm + area.widthMm / 2, area.yMm, area.widthMm / 2 - apartMm, area.heightMm - apartMm),
})

/** Left clear lines in ink, right ink lines in clear film. */
function fineLines(area: RectMm, pixelsPerInch: number): { grounds: Ground[], labels: PageLabel[] } {
  const { left, right } = halves(rect(area.xMm, area.yMm + labelMm, area.widthMm, area.heightMm - labelMm))
  const labels = [left, right].flatMap((half, side) => linePixels.map((pixels, i): PageLabel =>
    ({ id: `lines-${side}-${i}`, place: rect(groupX(half, i), area.yMm, (half.widthMm - 1) / linePixels.length - 0.5, labelMm - 0.4), ink: 'full', text: `${pixels} px` })))
  return { grounds: [{ place: left, ink: 'full' }, ...lines(left, 'clear', pixelsPerInch), ...lines(right, 'full', pixelsPerInch)], labels }
}

const groupX = (half: RectMm, group: number): number => half.xMm + 1 + group * (half.widthMm - 1) / linePixels.length

function lines(half: RectMm, ink: Ground['ink'], pixelsPerInch: number): Ground[] {
  return linePixels.flatMap((width, group) => {
    const first = pixelsFromMm(groupX(half, group), pixelsPerInch)
    return Array.from({ length: linesOfAWidth }, (_, i): Ground => {
      const from = mmFromPixels(first + i * width * (1 + gapWidths), pixelsPerInch)
      return { place: rect(from, half.yMm + 1, mmFromPixels(width, pixelsPerInch), half.heightMm - 2), ink }
    })
  })
}

/** Left clear letters in ink, right ink letters on clear film. */
function smallText(area: RectMm): { grounds: Ground[], labels: PageLabel[] } {
  const { left, right } = halves(area)
  const labels = [left, right].flatMap((half, side) => {
    let y = half.yMm + 1
    return textPoints.map((points): PageLabel => {
      const place = rect(half.xMm + 2, y, half.widthMm - 4, labelPlaceMm(points))
      y += place.heightMm
      return { id: `text-${side}-${points}`, place, ink: side === 0 ? 'clear' : 'full', text: `${sampleText} · ${points} pt` }
    })
  })
  return { grounds: [{ place: left, ink: 'full' }], labels }
}
