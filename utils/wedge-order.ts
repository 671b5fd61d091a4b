import type { z } from 'zod'
import type { Bench } from '#shared/schemas/benches'
import type { tabletPlan, wedgeBody, WedgeKind } from '#shared/schemas/wedges'
import type { SizeMm } from '#shared/sheet/sizes'
import { formatExposure } from './exposure-time'

/** What the form for a wedge or guide holds, whichever kind is chosen. */
export interface WedgeDraft {
  kind: WedgeKind
  page: SizeMm
  steps: '21' | '31'
  inkMixes: string[]
  firstExposure: number
  tablet: z.input<typeof tabletPlan>
  isThroughCurve: boolean
}

const stripSteps = 10

/** Film A4; a strip that ends well above the base exposure where one is known: its eighth window gets about that. */
export const emptyWedgeDraft = (kind: WedgeKind, baseExposure: Bench['baseExposure']): WedgeDraft => ({
  kind, page: { widthMm: 210, heightMm: 297 }, steps: '21', inkMixes: ['#000000', '#303000', '#402000', '#003000'],
  firstExposure: baseExposure ? Math.max(1, Math.round(baseExposure.value / 2 ** 3.5)) : 20,
  tablet: { steps: 21, stepWidthMm: 8, stepHeightMm: 12 }, isThroughCurve: false,
})

/** The draft as the service takes it. */
export function wedgeOrderOf(draft: WedgeDraft, bench: Pick<Bench, 'baseExposure' | 'curveInUse'>): z.input<typeof wedgeBody> {
  const { kind, page } = draft
  return {
    kind, page,
    ...kind === 'numbered' ? { steps: draft.steps === '21' ? 21 as const : 31 as const } : {},
    ...kind === 'ink-trial' ? { inkMixes: draft.inkMixes } : {},
    ...kind === 'exposure-strip' ? { exposureStrip: { firstExposure: draft.firstExposure, unit: bench.baseExposure?.unit ?? 's', steps: stripSteps } } : {},
    ...kind === 'step-tablet' ? { tablet: draft.tablet } : {},
    ...draft.isThroughCurve && bench.curveInUse ? { throughCurveId: bench.curveInUse.id } : {},
  }
}

/** `10 windows from 20 s to 7 min 32 s, each half a stop more`. */
export function sayStrip(firstExposure: number, unit: 's' | 'dose'): string {
  const write = (value: number) => unit === 's' ? formatExposure(value) : `${Math.round(value)} units`
  return `${stripSteps} windows from ${write(firstExposure)} to about ${write(Math.round(firstExposure * 2 ** ((stripSteps - 1) / 2)))}, each half a stop more than the one before.`
}
