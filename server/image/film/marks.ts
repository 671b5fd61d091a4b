import type { FilmOrder } from '../protocol'
import type { Rectangle } from '../sample/placement'
import type { FilmLayout } from './layout'
import { drawText } from './text-mask'

/** Something drawn in the margin, in film pixels as the print reads; whole where it has no `coverage`. */
export interface Mark extends Rectangle { coverage?: Uint8Array }

// Sizes in mm and points; common practice, no source.
const tickWidthMm = 0.1
const tickLengthsMm = { one: 1.2, five: 2, ten: 3 }
const numberPoints = 5, labelPoints = 7, leastPoints = 3.5
const gapMm = 0.4
const mmPerPoint = 25.4 / 72

/** Rulers along the print's top and left edge and the label below it, as far as the margin has room. */
export async function layOutMarks(order: FilmOrder, layout: FilmLayout): Promise<Mark[]> {
  const pixels = (mm: number) => Math.round(mm * order.pixelsPerInch / 25.4)
  const marginMm = order.margin.pixels * 25.4 / order.pixelsPerInch
  if (order.margin.pixels === 0) return []
  const marks: Mark[] = []
  if (order.marks.ruler) marks.push(...await drawRulers(order, layout, marginMm, pixels))
  if (order.marks.label && order.marks.labelText.trim()) marks.push(...await drawLabel(order, layout, marginMm, pixels))
  return marks
}

const tickLengthMm = (mm: number) => mm % 10 === 0 ? tickLengthsMm.ten : mm % 5 === 0 ? tickLengthsMm.five : tickLengthsMm.one

async function drawRulers(order: FilmOrder, { print }: FilmLayout, marginMm: number, pixels: (mm: number) => number): Promise<Mark[]> {
  const marks: Mark[] = []
  const tick = Math.max(1, pixels(tickWidthMm)), half = Math.floor(tick / 2)
  const shorten = Math.min(1, 0.8 * marginMm / tickLengthsMm.ten)
  const numberMm = tickLengthsMm.ten + 2 * gapMm + numberPoints * mmPerPoint
  const hasNumbers = marginMm >= numberMm
  const gap = pixels(gapMm)
  for (const axis of ['across', 'down'] as const) {
    const side = axis === 'across' ? print.width : print.height
    for (let mm = 0; pixels(mm) <= side; mm++) {
      const at = pixels(mm) - half
      const length = Math.max(1, pixels(tickLengthMm(mm) * shorten))
      marks.push(axis === 'across'
        ? { x: print.x + at, y: print.y - length, width: tick, height: length }
        : { x: print.x - length, y: print.y + at, width: length, height: tick })
      if (!hasNumbers || mm % 10 !== 0 || mm === 0) continue
      const text = await drawText(String(mm), numberPoints, order.pixelsPerInch)
      const number = axis === 'across'
        ? { x: print.x + pixels(mm) - Math.floor(text.width / 2), y: print.y - length - gap - text.height }
        : { x: print.x - length - gap - text.width, y: print.y + pixels(mm) - Math.floor(text.height / 2) }
      if (number.x >= 0 && number.y >= 0) marks.push({ ...text, ...number })
    }
  }
  return marks
}

/** The label's line in the bottom margin, made smaller where it would be too long. */
async function drawLabel(order: FilmOrder, layout: FilmLayout, marginMm: number, pixels: (mm: number) => number): Promise<Mark[]> {
  const room = layout.width - layout.print.x - pixels(gapMm)
  const points = Math.min(labelPoints, (marginMm - 2 * gapMm) / mmPerPoint)
  if (points < leastPoints) return []
  const text = await drawText(order.marks.labelText, points, order.pixelsPerInch)
  const fitting = text.width <= room ? text : await drawText(order.marks.labelText, Math.max(leastPoints, points * room / text.width), order.pixelsPerInch)
  const below = layout.print.y + layout.print.height
  return [{ ...fitting, x: layout.print.x, y: below + Math.max(0, Math.floor((layout.height - below - fitting.height) / 2)) }]
}
