import type { SeededRandom } from '../../../shared/calibration/random'
import type { WedgeLayout } from '../../../shared/calibration/wedge-layout'
import { cellMm, readShare } from '../../../shared/calibration/wedge-layout'
import type { WedgePatch } from '../../../shared/calibration/wedge-print'
import type { PatchPlan, PrintQuality } from './print'
import { printPatches } from './print'
import type { PrintedBench } from './system'

const pixelsOf = (widthMm: number, heightMm: number): number => widthMm * heightMm * readShare ** 2 * (300 / 25.4) ** 2

/** One print of a scattered wedge, as its patches would be read without any scanner's error. */
export function printWedge(system: PrintedBench, layout: WedgeLayout, quality: PrintQuality, random: SeededRandom): WedgePatch[] {
  const plan = layout.cells.map(({ level, x, y }): PatchPlan =>
    ({ level, x, y, xMm: x * layout.widthMm / 2, yMm: y * layout.heightMm / 2, pixels: pixelsOf(cellMm, cellMm) }))
  const lightnesses = printPatches(system, plan, quality, random)
  return plan.map(({ level, x, y, xMm, yMm }, i) => ({ level, x, y, xMm, yMm, lightness: lightnesses[i]! }))
}

/** One print of steps in order, row by row over 168 × 112 mm: what a strip of patches gives. */
export function printStepsInOrder(system: PrintedBench, columns: number, rows: number, steps: number, quality: PrintQuality, random: SeededRandom): { level: number, lightness: number }[] {
  const [widthMm, heightMm] = [168, 112]
  const plan = Array.from({ length: steps }, (_, i): PatchPlan => {
    const [x, y] = [(2 * (i % columns) + 1) / columns - 1, (2 * Math.floor(i / columns) + 1) / rows - 1]
    return { level: i / (steps - 1), x, y, xMm: x * widthMm / 2, yMm: y * heightMm / 2, pixels: pixelsOf(widthMm / columns, heightMm / rows) }
  })
  const lightnesses = printPatches(system, plan, quality, random)
  return plan.map(({ level }, i) => ({ level, lightness: lightnesses[i]! }))
}
