import { valueAt } from '../../tone/response'
import { layoutWedge, wedgeGrids } from '../wedge-layout'
import { exposureStripPage, stripExposures } from './exposure-strip'
import { inkLoadLevels, inkLoadPage } from './ink-load'
import { inkTrialCells } from './ink-trial'
import { numberedLevels, numberedPage } from './numbered-page'
import type { WedgePage } from './page'
import type { WedgePlan } from './plan'
import { scatteredPage } from './scattered-page'
import { snapWedgePage } from './snap'
import { tabletDensities, tabletPage } from './tablet-guide'

/** What stands in a patch. */
export interface ChartPatch {
  /** ink level on the film, 0 … 1 */
  level: number
  /** through a curve: the wanted tone */
  tone?: number
  /** of an ink trial: the colour of full ink of this patch's mix */
  inkColor?: string
  /** of an exposure strip: seconds or dose in all */
  exposure?: number
  /** of a step tablet: absolute density */
  density?: number
}

/** A wedge or guide, laid out. */
export interface WedgeChart {
  /** on the pixel grid of the film file; coordinates count from the chart's own corner, wherever it lies on a sheet */
  page: WedgePage
  /** in the order of `page.patches` */
  patches: ChartPatch[]
  /** the patches' ink levels where tones follow from nothing else, for the reading of a scan; else null (ink trials and guides) */
  readingLevels: number[] | null
}

/**
 * Lays a wedge out from its plan for a film of `pixelsPerInch`: the same plan gives the same chart on every machine.
 * With `throughCurve` (ink levels 0 … 1 at 1025 equal steps of tone) scattered and numbered wedges hold tones instead of
 * levels: the tone takes the level's place, 8-bit codes too, and the level is the curve's, as in a negative.
 * @throws ComputeError `invalid_input` for a plan that is damaged or does not fit its page.
 */
export function chartOf(plan: WedgePlan, pixelsPerInch: number, throughCurve: ArrayLike<number> | null = null): WedgeChart {
  const patches = patchesOf(plan)
  const isWedge = plan.kind === 'scattered' || plan.kind === 'numbered'
  const filled = isWedge && throughCurve ? patches.map(({ level }) => ({ level: valueAt(throughCurve, level), tone: level })) : patches
  return { page: snapWedgePage(chartPage(plan, pixelsPerInch), pixelsPerInch), patches: filled, readingLevels: isWedge ? filled.map(patch => patch.level) : null }
}

/**
 * The page of a plan before it is laid on a film's pixels; quick, as no levels are scattered.
 * @throws ComputeError `invalid_input` for a plan that does not fit its page.
 */
export function chartPage(plan: WedgePlan, pixelsPerInch: number): WedgePage {
  switch (plan.kind) {
    case 'scattered': case 'ink-trial': return scatteredPage(wedgeGrids[plan.grid])
    case 'numbered': return numberedPage(plan.steps)
    case 'ink-load': return inkLoadPage(plan.grid, pixelsPerInch)
    case 'exposure-strip': return exposureStripPage(plan.grid, plan.strip)
    case 'step-tablet': return tabletPage(plan.grid, plan.tablet)
  }
}

function patchesOf(plan: WedgePlan): ChartPatch[] {
  switch (plan.kind) {
    case 'scattered': return layoutWedge(plan).cells.map(({ level }) => ({ level }))
    case 'numbered': return numberedLevels(plan.steps).map(level => ({ level }))
    case 'ink-trial': return inkTrialCells(plan.grid, plan.seed, plan.mixes.length).map(({ mix, level }) => ({ level, inkColor: plan.mixes[mix]! }))
    case 'ink-load': return inkLoadLevels().map(level => ({ level }))
    case 'exposure-strip': return stripExposures(plan.strip).map(exposure => ({ level: 0, exposure }))
    case 'step-tablet': return tabletDensities(plan.tablet).map(density => ({ level: 0, density }))
  }
}
