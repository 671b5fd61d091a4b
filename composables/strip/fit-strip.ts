import { findBaseExposure, type BaseExposure, type ExposureGoal } from '#shared/calibration/base-exposure'
import { ComputeError } from '#shared/errors'
import type { StripPoint } from '../../utils/strip-plot'

export interface StripOrder { points: StripPoint[], goal: ExposureGoal }
export interface StripFit { base: BaseExposure | null, /** why there is none */ problem: string | null }
export const noFit: StripFit = { base: null, problem: null }

/** Fewer different exposures than this tell nothing; until then nothing is wrong either. */
export const leastExposures = 5

/** The base exposure of a strip, or the sentence that says what hinders it. */
export function fitStrip({ points, goal }: StripOrder): StripFit {
  if (new Set(points.map(p => p.exposure)).size < leastExposures) return noFit
  try {
    return { base: findBaseExposure(points.map(({ exposure, lightness }) => ({ exposureSeconds: exposure, lightness })), goal), problem: null }
  }
  catch (error) {
    if (!(error instanceof ComputeError)) throw error
    return { base: null, problem: error.message }
  }
}
