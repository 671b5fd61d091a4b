import type { H3Event } from 'h3'
import { getRouterParam } from 'h3'
import { ComputeError } from '#shared/errors'
import { walkStep, type WalkStep } from '#shared/schemas/calibration'

/** Which step of the walk the path names; anything else is nowhere. */
export function walkStepParam(event: H3Event): WalkStep {
  const parsed = walkStep.safeParse(getRouterParam(event, 'step'))
  if (!parsed.success) throw new ComputeError('not_found', 'There is no such step.')
  return parsed.data
}
