import { layOutFrame } from './frame'
import type { PageLabel, RectMm, WedgePage } from './page'
import { rect } from './page'

/** Field of a numbered wedge, mm: the film is the 200 × 138 mm of the usual scattered wedge. */
const [fieldWidthMm, fieldHeightMm] = [168, 112]
const rowsOfOneWedge = 3
/** Strip above a step that carries its number, and the bare film around a step, mm. */
const [numberMm, apartMm] = [3, 1]

/** Steps a numbered wedge is made with. */
export type NumberedSteps = 21 | 31

/**
 * The page of a numbered wedge for a spot instrument or the eye: 21 or 31 steps of at least 12 mm, three rows from first
 * to last, then three from last to first, so that a fall-off of coating or light shows as a difference of two equal steps.
 * `patches` come in that order; use `numberedLevels` for what stands in them.
 */
export function numberedPage(steps: NumberedSteps): WedgePage {
  const frame = layOutFrame(fieldWidthMm, fieldHeightMm)
  const [columns, rows] = [Math.ceil(steps / rowsOfOneWedge), 2 * rowsOfOneWedge]
  const [pitchX, pitchY] = [fieldWidthMm / columns, fieldHeightMm / rows]
  const patches: RectMm[] = []
  const numbers: PageLabel[] = []
  for (let i = 0; i < 2 * steps; i++) {
    const place = i < steps ? i : rowsOfOneWedge * columns + i - steps
    const [x, y] = [frame.field.xMm + place % columns * pitchX, frame.field.yMm + Math.floor(place / columns) * pitchY]
    patches.push(rect(x + apartMm, y + numberMm + apartMm, pitchX - 2 * apartMm, pitchY - numberMm - 2 * apartMm))
    numbers.push({ id: `step-${i}`, place: rect(x + apartMm, y + apartMm / 2, 10, numberMm), ink: 'full', text: String(stepNumber(i, steps)) })
  }
  return { ...frame, kind: 'numbered', columns, rows, patches, labels: [...frame.labels, ...numbers], pixelsPerInch: null }
}

/** Ink levels of a numbered wedge's patches: equal steps from clear to full ink, rounded to 8-bit codes, then back again. */
export const numberedLevels = (steps: NumberedSteps): number[] =>
  Array.from({ length: 2 * steps }, (_, i) => Math.round(255 * (stepNumber(i, steps) - 1) / (steps - 1)) / 255)

/** Number 1 … steps of the i-th patch. */
const stepNumber = (i: number, steps: number): number => i < steps ? i + 1 : 2 * steps - i
