import type { Bench } from '#shared/schemas/benches'
import type { Curve, Reading } from '#shared/schemas/curves'

export type NextAction = 'set-up' | 'base-exposure' | 'read' | 'fit' | 'use' | 'negative'
export interface NextStep { action: NextAction, title: string, reason: string, label: string }

type CurveBrief = Pick<Curve, 'id' | 'version' | 'state' | 'readingIds' | 'expectedError'>

/** The one thing to do next on a bench, in the order of a calibration. */
export function benchNextStep(bench: Bench, readings: readonly Pick<Reading, 'id' | 'state'>[], curves: readonly CurveBrief[], mayCalibrate: boolean): NextStep {
  const inUse = curves.find(curve => curve.state === 'in-use')
  if (!mayCalibrate) return negativeStep(inUse, bench.starter)
  if (bench.starter) return { action: 'set-up', title: 'Next: set up a bench of your own.', reason: 'A starter knows the process, not your paper, film and lamp. Only a wedge print can tell.', label: 'Set up a bench' }
  if (!bench.baseExposure) return { action: 'base-exposure', title: 'Next: write down the base exposure.', reason: 'It is the shortest exposure that gives the paper’s full black through clear film.', label: 'Enter base exposure' }
  if (readings.length === 0) return { action: 'read', title: 'Next: read a wedge print.', reason: 'Type in what you measured on each step, or import a file.', label: 'Enter readings' }
  const draft = curves.find(curve => curve.state === 'draft' && curve.version > (inUse?.version ?? 0))
  const fitted = new Set(curves.flatMap(curve => curve.readingIds))
  const unfitted = readings.filter(reading => reading.state === 'ready' && !fitted.has(reading.id)).length
  if (unfitted > 0) return { action: 'fit', title: 'Next: fit a curve.', reason: unfitted === 1 ? 'One reading is in no curve yet.' : `${unfitted} readings are in no curve yet.`, label: 'Fit a curve' }
  if (draft) return { action: 'use', title: `Next: put curve ${draft.version} in use.`, reason: 'Look at the plot first: the points should scatter about the line, without a bend of their own.', label: `Use curve ${draft.version}` }
  if (!inUse) return { action: 'fit', title: 'Next: fit a curve.', reason: 'No curve is in use, so no negative can be made here.', label: 'Fit a curve' }
  return negativeStep(inUse, false)
}

function negativeStep(inUse: CurveBrief | undefined, starter: boolean): NextStep {
  const step = { action: 'negative' as const, title: 'Next: make a negative.', label: 'Make a negative' }
  if (starter || !inUse?.expectedError) return { ...step, reason: 'The curve in use is uncalibrated: print a small test first.' }
  const count = inUse.readingIds.length
  return { ...step, reason: `One more wedge print would bring the next print from ± ${inUse.expectedError.nextPrint.p95.toFixed(1)} to about ± ${withOneMore(inUse.expectedError.nextPrint.p95, count).toFixed(1)} L*.` }
}

/** With n wedge prints the next print's error goes as √(1 + 1/n) times the print-to-print spread. */
export const withOneMore = (p95: number, wedgePrints: number) => p95 * Math.sqrt((1 + 1 / (wedgePrints + 1)) / (1 + 1 / wedgePrints))
