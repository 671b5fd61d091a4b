import type { z } from 'zod'
import type { exposureStripPlan, tabletPlan } from '../../schemas/wedges'
import type { WedgeGrid } from '../wedge-layout'

/** All that a wedge is laid out from, besides its resolution and its curve; the same record gives the same wedge again. */
export type WedgePlan =
  | { kind: 'scattered', grid: WedgeGrid, seed: number }
  | { kind: 'numbered', steps: 21 | 31 }
  | { kind: 'ink-trial', mixes: string[], seed: number }
  | { kind: 'ink-load' }
  | { kind: 'exposure-strip', strip: z.infer<typeof exposureStripPlan> }
  | { kind: 'step-tablet', tablet: z.infer<typeof tabletPlan> }
