import { isotonic } from '#shared/calibration/isotonic'
import { pchip } from '#shared/calibration/pchip'
import type { SeededRandom } from '#shared/calibration/random'
import { curveLevels } from '#shared/tone/levels'
import { interpolateAll, responsePoints } from '#shared/tone/response'
import type { PrintQuality } from '../../../tests/support/simulator/print'
import type { PrintedBench } from '../../../tests/support/simulator/system'
import { printStepsInOrder } from '../../../tests/support/simulator/wedge'
import { fitPolynomial } from './polynomial'

export interface Step { level: number, lightness: number }
/** Prints steps in order, row by row, on the wedge's film. */
export type PrintSteps = (columns: number, rows: number, steps: number) => Step[]

const grid = Float64Array.from({ length: responsePoints }, (_, i) => i / (responsePoints - 1))

/** What people do today from one print of ordered steps: the curve's levels at 1025 tones, aim even lightness. */
export const baselines: Record<string, (print: PrintSteps) => Float64Array> = {
  'no curve': () => grid,
  '21 steps in order, straight lines': print => inverse(straightLines(print(7, 3, 21))),
  '31 steps in order, isotonic and PCHIP': print => inverse(isotonicPchip(print(8, 4, 31))),
  '31 steps in order, polynomial of degree 4': print => inverse(fitPolynomial(print(8, 4, 31), 4)),
}

const inverse = (response: Float64Array): Float64Array => curveLevels(isotonic(response), 'even-lightness')

const straightLines = (steps: Step[]): Float64Array => interpolateAll(isotonic(steps.map(s => s.lightness)), grid)

function isotonicPchip(steps: Step[]): Float64Array {
  return grid.map(pchip(steps.map(s => s.level), [...isotonic(steps.map(s => s.lightness))]))
}

/** Prints of a system, made the same way as its wedges. */
export const stepsPrintedBy = (system: PrintedBench, quality: PrintQuality, random: SeededRandom): PrintSteps =>
  (columns, rows, steps) => printStepsInOrder(system, columns, rows, steps, quality, random)
