import type { z } from 'zod'
import { ComputeError } from '../../errors'
import type { exposureStripPlan } from '../../schemas/wedges'
import type { WedgeGrid } from '../wedge-layout'
import { guidePage } from './guide-frame'
import type { Ground, PageLabel, RectMm, WedgePage } from './page'
import { rect } from './page'

type Strip = z.infer<typeof exposureStripPlan>

/** Full ink between two windows: the card's edge lies somewhere on it. mm */
const barMm = 2
/** Line that says what to do; the two lines above a window; bare film below one, mm. */
const [headMm, lineMm, belowMm] = [4, 3, 3]

/**
 * Exposures of an exposure strip's windows in seconds or dose, the first row's from left to right, then the second row's, which
 * has them the other way round: each step's is `stopsPerStep` stops above the one before, and rounded; the rounded one is what
 * the paper gets. Seconds are rounded to what a clock is read to (0.1 below 10, 1 below 100, else 5), light units to three figures.
 * @throws ComputeError `invalid_input` when two steps come out the same.
 */
export function stripExposures({ firstExposure, steps, stopsPerStep, unit }: Strip): number[] {
  const rounded = unit === 's' ? asTimed : (exposure: number) => Number(exposure.toPrecision(3))
  const rising = Array.from({ length: steps }, (_, i) => rounded(firstExposure * 2 ** (stopsPerStep * i)))
  if (rising.some((exposure, i) => i > 0 && exposure <= rising[i - 1]!)) {
    throw new ComputeError('invalid_input', 'The first steps of this strip are too short to tell apart on a clock. Begin with a longer exposure, or take larger steps.',
      [{ path: 'exposureStrip.firstExposure', message: 'Begin with a longer exposure.' }])
  }
  return [...rising, ...rising.toReversed()]
}

/** Tenths by division, so that 0.3 stays 0.3. */
const asTimed = (exposure: number): number => exposure < 10 ? Math.round(exposure * 10) / 10 : exposure < 100 ? Math.round(exposure) : 5 * Math.round(exposure / 5)

/**
 * The guide of an exposure strip: two rows of clear windows between bars of full ink. Two opaque cards cover them one by one,
 * in the upper row from the left, in the lower row from the right; above each window stands when its card has to cover it.
 * `patches` are the windows, upper row first, in the order of `stripExposures`.
 */
export function exposureStripPage(grid: WedgeGrid, strip: Strip): WedgePage {
  const exposures = stripExposures(strip)
  return guidePage(grid, (field) => {
    const pitch = (field.widthMm - barMm) / strip.steps
    const rowMm = (field.heightMm - headMm) / 2
    const windowMm = rowMm - 2 * lineMm - belowMm
    const patches: RectMm[] = []
    const grounds: Ground[] = []
    const labels: PageLabel[] = [head(field)]
    for (let i = 0; i < 2 * strip.steps; i++) {
      const [row, column] = [Math.floor(i / strip.steps), i % strip.steps]
      const [x, top] = [field.xMm + barMm + column * pitch, field.yMm + headMm + row * rowMm]
      const y = top + 2 * lineMm
      if (column === 0) grounds.push({ place: rect(field.xMm, y, barMm, windowMm), ink: 'full' })
      grounds.push({ place: rect(x + pitch - barMm, y, barMm, windowMm), ink: 'full' })
      patches.push(rect(x, y, pitch - barMm, windowMm))
      labels.push(line(`step-${i}`, x, top, pitch - barMm / 2, String(row === 0 ? column + 1 : strip.steps - column)))
      labels.push(line(`time-${i}`, x, top + lineMm, pitch - barMm / 2, formatStripExposure(exposures[i]!, strip.unit)))
    }
    return { columns: strip.steps, rows: 2, patches, grounds, labels }
  })
}

const line = (id: string, xMm: number, yMm: number, widthMm: number, text: string): PageLabel => ({ id, place: rect(xMm, yMm, widthMm, lineMm - 0.4), ink: 'full', text })

const head = ({ xMm, yMm, widthMm }: RectMm): PageLabel =>
  line('cards', xMm, yMm, widthMm, 'Cover each window when its time is up: above with a card from the left, below with one from the right.')

/** `85 s`, `2:50 min`, or light units as they are. */
export function formatStripExposure(exposure: number, unit: Strip['unit']): string {
  if (unit === 'dose') return String(exposure)
  return exposure < 120 ? `${exposure} s` : `${Math.floor(exposure / 60)}:${String(exposure % 60).padStart(2, '0')} min`
}
