import { seededRandom } from '#shared/calibration/random'
import { fitWedge, type WedgeFit } from '#shared/calibration/wedge-fit'
import { layoutWedge } from '#shared/calibration/wedge-layout'
import { curveLevels } from '#shared/tone/levels'
import { responsePoints } from '#shared/tone/response'
import { printQualities, rampErrors, type QualityLevel } from '../../../tests/support/simulator/print'
import { drawSystem, type PrintSystem } from '../../../tests/support/simulator/system'
import { printStepsInOrder, printWedge } from '../../../tests/support/simulator/wedge'
import { baselines, type PrintSteps } from './ordered-steps'
import { measured, type Measure } from './suite'

/** Greatest |ΔL*| of a ramp, median and 95th percentile, that the product's wedge and fit must keep to. */
const goals: Record<QualityLevel, [median: number, p95: number]> = { typical: [0.25, 0.5], rough: [0.4, 0.9], careful: [0.15, 0.3] }
const systemsPerLevel = 60
/** Bands are judged on more systems than errors, of the typical kind. */
const systemsForBands = 200
/** Every so many of the 1025 levels is looked at. */
const stride = 4

/**
 * Simulated prints of many systems through the product's own wedge and fit and through what people do today: errors of an
 * evenly printed ramp, coverage of the bands, time of a fit. Seeded: each run measures the same prints.
 */
export async function* run(): AsyncGenerator<Measure> {
  for (const level of Object.keys(goals) as QualityLevel[]) yield* errorsOf(level)
  yield* bandsAndTime()
}

async function* errorsOf(level: QualityLevel): AsyncGenerator<Measure> {
  const errors = new Map<string, number[]>()
  const note = (name: string, error: number): void => { errors.set(name, [...errors.get(name) ?? [], error]) }
  for (let seed = 0; seed < systemsPerLevel; seed++) {
    const { system, fit, print } = simulate(seed, level)
    const ours = rampErrors(system, curveLevels(fit.response, 'even-lightness'))
    note('product', ours.greatest)
    note('product, mean over the ramp', ours.mean)
    for (const [name, levelsOf] of Object.entries(baselines)) note(name, rampErrors(system, levelsOf(print)).greatest)
    await pause()
  }
  const [median, p95] = goals[level]
  for (const [name, list] of errors) {
    const isProduct = name === 'product'
    yield measured(`${level}: ${name}, median`, quantile(list, 0.5), 'L*', isProduct ? median : null)
    yield measured(`${level}: ${name}, 95th percentile`, quantile(list, 0.95), 'L*', isProduct ? p95 : null)
  }
}

async function* bandsAndTime(): AsyncGenerator<Measure> {
  let [inside, all, whole] = [0, 0, 0]
  const seconds: number[] = []
  for (let seed = 0; seed < systemsForBands; seed++) {
    const { system, fit, fitSeconds } = simulate(1000 + seed, 'typical')
    let isInside = true
    for (let i = 0; i < responsePoints; i += stride) {
      const truth = system.lightness(i / (responsePoints - 1))
      all++
      if (truth >= fit.low[i]! && truth <= fit.high[i]!) inside++
      if (truth < fit.lowOfAll[i]! || truth > fit.highOfAll[i]!) isInside = false
    }
    if (isInside) whole++
    seconds.push(fitSeconds)
    await pause()
  }
  const coverage = 100 * inside / all
  yield { name: 'typical: pointwise 95 % band holds the truth', value: coverage, unit: '%', goal: 95, ok: coverage >= 93 && coverage <= 97, reason: 'goal 93 to 97' }
  yield measured('typical: simultaneous 95 % band holds the truth', 100 * whole / systemsForBands, '%')
  yield measured('fit of 384 patches, median', quantile(seconds, 0.5), 's', 1)
}

function simulate(seed: number, level: QualityLevel): { system: PrintSystem, fit: WedgeFit, fitSeconds: number, print: PrintSteps } {
  const random = seededRandom(seed)
  const system = drawSystem(random)
  const patches = printWedge(system, layoutWedge({ grid: '24x16', seed }), printQualities[level], random)
  const started = performance.now()
  const fit = fitWedge([patches])
  const fitSeconds = (performance.now() - started) / 1000
  return { system, fit, fitSeconds, print: (columns, rows, steps) => printStepsInOrder(system, columns, rows, steps, printQualities[level], random) }
}

function quantile(values: readonly number[], share: number): number {
  const sorted = [...values].sort((a, b) => a - b)
  return sorted[Math.min(sorted.length - 1, Math.floor(share * sorted.length))]!
}

/** Lets the process hear signals between two fits. */
const pause = (): Promise<void> => new Promise(resolve => setImmediate(resolve))
