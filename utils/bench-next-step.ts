import type { Bench } from '#shared/schemas/benches'
import type { Walk, WalkStep } from '#shared/schemas/calibration'
import type { Curve, Reading } from '#shared/schemas/curves'
import { oneMoreText } from './curve-words'

/** `walk` leads to the step of the walk that `step` names; the others are done on the bench's page itself, or lead elsewhere. */
export type NextAction = 'set-up' | 'walk' | 'fit' | 'use' | 'negative'
export interface NextStep { action: NextAction, step?: WalkStep, title: string, reason: string, label: string }

type CurveBrief = Pick<Curve, 'id' | 'version' | 'state' | 'readingIds' | 'expectedError'>

/** Steps with handwork before them. */
const walkSteps: Partial<Record<WalkStep, Omit<NextStep, 'action' | 'step'>>> = {
  'path': { title: 'Next: write down the path.', reason: 'A negative that takes another way to the inkjet than its wedge prints other tones.', label: 'Path and settings' },
  'ink-load': { title: 'Next: see whether the film takes the ink.', reason: 'A film that beads or smears spoils every step after it.', label: 'Try the ink load' },
  'base-exposure': { title: 'Next: find the base exposure.', reason: 'It is the shortest exposure that gives the paper’s full black through clear film.', label: 'Find the base exposure' },
  'wedge': { title: 'Next: put a wedge on film.', reason: 'Its print tells what tone each amount of ink gives on this paper.', label: 'Put a wedge on film' },
  'expose': { title: 'Next: make a wedge print.', reason: 'Expose the film at the base exposure, develop the print and let it dry.', label: 'Expose the wedge' },
  'read': { title: 'Next: read the wedge print.', reason: 'Scan it once it is dry; a phone picture does for a first look.', label: 'Read the print' },
}

/** The one thing to do next on a bench, in the order of a calibration. */
export function benchNextStep(bench: Bench, walk: Pick<Walk, 'now'>, readings: readonly Pick<Reading, 'id' | 'state'>[], curves: readonly CurveBrief[], mayCalibrate: boolean): NextStep {
  const inUse = curves.find(curve => curve.state === 'in-use')
  if (!mayCalibrate) return negativeStep(inUse, bench.starter)
  if (bench.starter) return { action: 'set-up', title: 'Next: set up a bench of your own.', reason: 'A starter knows the process, not your paper, film and lamp. Only a wedge print can tell.', label: 'Set up a bench' }
  const { now } = walk
  const handwork = now && walkSteps[now]
  if (handwork) return { action: 'walk', step: now, ...handwork }
  return (now === 'curve' && curveStep(readings, curves, inUse)) || negativeStep(inUse, false, now === 'check')
}

function curveStep(readings: readonly Pick<Reading, 'id' | 'state'>[], curves: readonly CurveBrief[], inUse: CurveBrief | undefined): NextStep | undefined {
  const fitted = new Set(curves.flatMap(curve => curve.readingIds))
  const unfitted = readings.filter(reading => reading.state === 'ready' && !fitted.has(reading.id)).length
  if (unfitted > 0) return { action: 'fit', title: 'Next: fit a curve.', reason: unfitted === 1 ? 'One reading is in no curve yet.' : `${unfitted} readings are in no curve yet.`, label: 'Fit a curve' }
  const draft = curves.find(curve => curve.state === 'draft' && curve.version > (inUse?.version ?? 0))
  if (draft) return { action: 'use', title: `Next: put curve ${draft.version} in use.`, reason: 'Look at the plot first: the points should scatter about the line, without a bend of their own.', label: `Use curve ${draft.version}` }
  return inUse ? undefined : { action: 'fit', title: 'Next: fit a curve.', reason: 'No curve is in use, so no negative can be made here.', label: 'Fit a curve' }
}

function negativeStep(inUse: CurveBrief | undefined, starter: boolean, asCheck = false): NextStep {
  const step = { action: 'negative' as const, title: asCheck ? 'Next: print a real picture as check.' : 'Next: make a negative.', label: 'Make a negative' }
  if (starter || !inUse?.expectedError) return { ...step, reason: 'The curve in use is uncalibrated: print a small test first.' }
  return { ...step, reason: oneMoreText(inUse.expectedError) ?? 'The curve in use is calibrated for this bench.' }
}
