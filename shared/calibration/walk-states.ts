import type { WalkStep, walkStates } from '../schemas/calibration'

export type WalkState = typeof walkStates[number]

/** What a bench's records tell about its calibration. Step wedges are the scattered and the numbered ones. */
export interface WalkRecords {
  isPathWritten: boolean
  hasBaseExposure: boolean
  stepWedges: number
  /** prints of step wedges */
  prints: number
  /** of these, made since the newest reading and not read yet */
  unreadPrints: number
  /** ready readings of step wedges, and typed values */
  readings: number
  /** of these, in no curve */
  unfittedReadings: number
  /** ready readings of ink trials */
  inkTrialReadings: number
  /** ready readings of wedges that were laid out through a curve */
  checkReadings: number
  hasDraftAhead: boolean
  /** a calibrated one */
  hasCurveInUse: boolean
}

/** Steps that the way to a curve can do without; the others can only be skipped on purpose. */
export const optionalSteps: readonly WalkStep[] = ['ink-trial']

/**
 * Which steps the records show as done. A wedge print or a reading fixes a bench's combination, so the path is settled whatever is
 * written of it; a reading shows that the film takes its ink. A further print asks to be read, a further reading to be fitted.
 */
export function isDoneByRecords(step: WalkStep, records: WalkRecords): boolean {
  const { readings } = records
  return {
    'path': records.isPathWritten || records.prints > 0 || readings > 0,
    'ink-load': readings > 0,
    'base-exposure': records.hasBaseExposure,
    'ink-trial': records.inkTrialReadings > 0,
    'wedge': records.stepWedges > 0 || readings > 0,
    'expose': records.prints > 0 || readings > 0,
    'read': readings > 0 && records.unreadPrints === 0,
    'curve': records.hasCurveInUse && !records.hasDraftAhead && records.unfittedReadings === 0,
    'check': records.checkReadings > 0,
  }[step]
}

/** The step to take up: the first open one that is not optional; null once all are done or skipped. */
export const stepNow = (steps: readonly { step: WalkStep, state: WalkState, optional: boolean }[]): WalkStep | null =>
  steps.find(({ state, optional }) => state === 'open' && !optional)?.step ?? null
