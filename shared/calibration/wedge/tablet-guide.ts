import type { z } from 'zod'
import { ComputeError } from '../../errors'
import type { tabletPlan } from '../../schemas/wedges'
import { wedgeGrids, type WedgeGrid } from '../wedge-layout'
import { guidePage } from './guide-frame'
import type { Ground, PageLabel, RectMm, WedgePage } from './page'
import { rect } from './page'
import { cellSideMm } from './scattered-page'

type Tablet = z.infer<typeof tabletPlan>

/** What step tablets rise by from one step to the next where nobody has measured them (common practice; 20 × 0.15 = 3.00). */
const densityPerStep = 0.15
const lineMm = 0.3
const labelMm = 3
/** Room around the tablet within the field, mm. */
const aroundMm = 6
/** Every so many steps one is numbered. */
const numberedEvery = 5

/**
 * Densities of the tablet's steps, the clearest first: as given (absolute), or 0.15 a step from 0.
 * @throws ComputeError `invalid_input` when another number of densities than of steps is given, or they do not rise.
 */
export function tabletDensities({ steps, densities }: Tablet): number[] {
  if (!densities) return Array.from({ length: steps }, (_, i) => Math.round(1000 * densityPerStep * i) / 1000)
  if (densities.length !== steps) throw new ComputeError('invalid_input', `This tablet has ${steps} steps, but ${densities.length} densities came with it.`, [{ path: 'tablet.densities', message: `Give ${steps} densities.` }])
  if (densities.some((density, i) => i > 0 && density <= densities[i - 1]!)) throw new ComputeError('invalid_input', 'The tablet’s densities must rise from step to step, the clearest step first.', [{ path: 'tablet.densities', message: 'Give them in rising order.' }])
  return densities
}

/**
 * The guide of a step tablet: a clear window, outlined, of the size of the tablet as it lies in the hand, its clearest step at
 * the left. `patches` are the steps.
 * @throws ComputeError `invalid_input` when the tablet is larger than the field.
 */
export function tabletPage(grid: WedgeGrid, { steps, stepWidthMm, stepHeightMm }: Tablet): WedgePage {
  const [widthMm, heightMm] = [steps * stepWidthMm, stepHeightMm]
  const { columns, rows } = wedgeGrids[grid]
  const [roomX, roomY] = [columns * cellSideMm - 4, rows * cellSideMm - 4 * aroundMm]
  if (widthMm > roomX || heightMm > roomY) throw new ComputeError('invalid_input', `A tablet of ${widthMm} × ${heightMm} mm is larger than this guide’s window can be (${roomX} × ${roomY} mm). Take a larger film sheet, or check the size of a step.`, [{ path: 'tablet', message: `At most ${roomX} × ${roomY} mm.` }])
  return guidePage(grid, (field) => {
    const tablet = rect(field.xMm + (field.widthMm - widthMm) / 2, field.yMm + (field.heightMm - heightMm) / 2, widthMm, heightMm)
    const patches = Array.from({ length: steps }, (_, i) => rect(tablet.xMm + i * stepWidthMm, tablet.yMm, stepWidthMm, stepHeightMm))
    return { columns: steps, rows: 1, patches, grounds: outline(tablet), labels: labels(field, tablet, patches) }
  })
}

/** Lines just outside the tablet, so that its edges lie on clear film. */
function outline({ xMm, yMm, widthMm, heightMm }: RectMm): Ground[] {
  const [x0, y0, long, high] = [xMm - lineMm, yMm - lineMm, widthMm + 2 * lineMm, heightMm + 2 * lineMm]
  return [rect(x0, y0, long, lineMm), rect(x0, yMm + heightMm, long, lineMm), rect(x0, y0, lineMm, high), rect(xMm + widthMm, y0, lineMm, high)]
    .map(place => ({ place, ink: 'full' }))
}

function labels(field: RectMm, tablet: RectMm, patches: RectMm[]): PageLabel[] {
  const text = (id: string, place: RectMm, words: string): PageLabel => ({ id, place, ink: 'full', text: words })
  const numbered = patches.flatMap((patch, i) => i % numberedEvery === 0 && i < patches.length - 1 || i === patches.length - 1 ? [{ patch, number: i + 1 }] : [])
  return [
    text('tablet', rect(field.xMm, tablet.yMm - aroundMm - labelMm, field.widthMm, labelMm), 'Lay the step tablet into the outline, its clearest step at 1.'),
    ...numbered.map(({ patch, number }) => text(`step-${number}`, rect(patch.xMm, tablet.yMm - lineMm - 0.7 - labelMm, Math.max(4, patch.widthMm), labelMm), String(number))),
  ]
}
