import type { z } from 'zod'
import type { exposureStripPlan, tabletPlan } from '../../schemas/wedges'
import type { WedgeGrid } from '../wedge-layout'

/**
 * All that a wedge is laid out from, besides its resolution and its curve; the same record gives the same wedge again.
 * `grid` says how large the field is: that of the scattered wedge with so many cells.
 */
export type WedgePlan =
  | { kind: 'scattered', grid: WedgeGrid, seed: number }
  | { kind: 'numbered', steps: 21 | 31 }
  | { kind: 'ink-trial', grid: WedgeGrid, seed: number, mixes: string[] }
  | { kind: 'ink-load', grid: WedgeGrid }
  | { kind: 'exposure-strip', grid: WedgeGrid, strip: z.infer<typeof exposureStripPlan> }
  | { kind: 'step-tablet', grid: WedgeGrid, tablet: z.infer<typeof tabletPlan> }
