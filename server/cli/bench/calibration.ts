// Longer than most: one suite, and its figures are read side by side.
import { seededRandom, type SeededRandom } from '#shared/calibration/random'
import { fitWedge, type WedgeFit } from '#shared/calibration/wedge-fit'
import { layoutWedge } from '#shared/calibration/wedge-layout'
import type { WedgePrint } from '#shared/calibration/wedge-print'
import { curveLevels } from '#shared/tone/levels'
import { responsePoints } from '#shared/tone/response'
import { drawOtherSystem } from '../../../tests/support/second-simulator/system'
import { printWedgeOtherwise } from '../../../tests/support/second-simulator/wedge'
import { printQualities, rampErrors, type QualityLevel } from '../../../tests/support/simulator/print'
import { drawSystem, withReversal, type PrintedBench } from '../../../tests/support/simulator/system'
import { printWedge } from '../../../tests/support/simulator/wedge'
import { baselines, stepsPrintedBy } from './ordered-steps'
import { measured, type Measure } from './suite'

/** Greatest |ΔL*| of a ramp, median and 95th percentile, that the product's wedge and fit must keep to. */
const goals: Record<QualityLevel, [median: number, p95: number]> = { typical: [0.25, 0.5], rough: [0.4, 0.9], careful: [0.15, 0.3] }
/** The same of the mean over the ramp, on a typical print. */
const meanGoals: [median: number, p95: number] = [0.1, 0.2]
const systemsPerLevel = 60
/** Bands are judged on more systems than errors, of the typical kind. */
const systemsForBands = { first: 200, second: 100 }
const systemsForReversal = 60
/** L* by which clear film prints lighter than the deepest tone. */
const reversalDip = 3.6
const pooledPrints = 4
/** Every so many of the 1025 levels is looked at. */
const stride = 4
/** Tones 0 … 1 between the print's ends, by which coverage is told region by region. */
const regions = { 'shadows (tone 0 to 0.2)': [0, 0.2], 'middle tones (0.2 to 0.8)': [0.2, 0.8], 'lights (0.8 to 1)': [0.8, 1.0001] } as const

/** A way to draw systems and print wedges of them. */
interface Simulator { draw: (random: SeededRandom) => PrintedBench, print: (bench: PrintedBench, seed: number, level: QualityLevel, random: SeededRandom) => WedgePrint }
const layoutOf = (seed: number) => layoutWedge({ grid: '24x16', seed })
const simulators: Record<'first' | 'second', Simulator> = {
  first: { draw: random => drawSystem(random), print: (bench, seed, level, random) => printWedge(bench, layoutOf(seed), printQualities[level], random) },
  second: { draw: drawOtherSystem, print: (bench, seed, level, random) => printWedgeOtherwise(bench, layoutOf(seed), level, random) },
}
/** The second simulator's figures stand beside the first's without goals: the first is the one the goals were set with. */
const suffix = { first: '', second: ' (second simulator)' } as const

/**
 * Simulated prints of many systems through the product's own wedge and fit and through what people do today: errors of an
 * evenly printed ramp, coverage of the bands, reversal, time of a fit. Seeded: each run measures the same prints.
 */
export async function* run(): AsyncGenerator<Measure> {
  for (const level of Object.keys(goals) as QualityLevel[]) yield* errorsOf(level)
  for (const level of Object.keys(goals) as QualityLevel[]) yield* errorsOfSecond(level)
  yield* bandsAndTime('first')
  yield* bandsAndTime('second')
  yield* reversals()
  yield* pooling()
}

async function* errorsOf(level: QualityLevel): AsyncGenerator<Measure> {
  const errors = new Map<string, number[]>()
  const note = (name: string, error: number): void => { errors.set(name, [...errors.get(name) ?? [], error]) }
  for (let seed = 0; seed < systemsPerLevel; seed++) {
    const { system, fit, random } = simulate('first', seed, level)
    const ours = rampErrors(system, curveLevels(fit.response, 'even-lightness'))
    note('product', ours.greatest)
    note('product, mean over the ramp', ours.mean)
    for (const [name, levelsOf] of Object.entries(baselines)) note(name, rampErrors(system, levelsOf(stepsPrintedBy(system, printQualities[level], random))).greatest)
    await pause()
  }
  for (const [name, list] of errors) {
    const goal = name === 'product' ? goals[level] : name.startsWith('product') && level === 'typical' ? meanGoals : null
    yield measured(`${level}: ${name}, median`, quantile(list, 0.5), 'L*', goal && goal[0])
    yield measured(`${level}: ${name}, 95th percentile`, quantile(list, 0.95), 'L*', goal && goal[1])
  }
}

async function* errorsOfSecond(level: QualityLevel): AsyncGenerator<Measure> {
  const errors: number[] = []
  for (let seed = 0; seed < systemsPerLevel; seed++) {
    const { system, fit } = simulate('second', seed, level)
    errors.push(rampErrors(system, curveLevels(fit.response, 'even-lightness')).greatest)
    await pause()
  }
  yield measured(`${level}: product, median${suffix.second}`, quantile(errors, 0.5), 'L*')
  yield measured(`${level}: product, 95th percentile${suffix.second}`, quantile(errors, 0.95), 'L*')
}

async function* bandsAndTime(which: keyof typeof simulators): AsyncGenerator<Measure> {
  const counts = new Map<string, { inside: number, all: number }>()
  let [whole, toldRight] = [0, 0]
  const [seconds, next]: [number[], number[]] = [[], []]
  for (let seed = 0; seed < systemsForBands[which]; seed++) {
    const { system, fit, fitSeconds } = simulate(which, 1000 + seed, 'typical')
    if (isHeldEverywhere(system, fit)) whole++
    countHeld(system, fit, counts)
    if (rampErrors(system, curveLevels(fit.response, 'even-lightness')).greatest <= fit.expectedError.curve.p95) toldRight++
    seconds.push(fitSeconds)
    next.push(fit.expectedError.nextPrint.p95)
    await pause()
  }
  for (const [name, { inside, all }] of counts) {
    const coverage = 100 * inside / all
    const isWhole = name === 'all tones' && which === 'first'
    yield { name: `typical: pointwise 95 % band holds the truth, ${name}${suffix[which]}`, value: coverage, unit: '%', goal: isWhole ? 95 : null, ok: isWhole ? coverage >= 93 && coverage <= 97 : null, ...(isWhole ? { reason: 'goal 93 to 97' } : {}) }
  }
  yield measured(`typical: simultaneous 95 % band holds the truth${suffix[which]}`, 100 * whole / systemsForBands[which], '%')
  yield measured(`typical: greatest error within the curve’s own 95th percentile${suffix[which]}`, 100 * toldRight / systemsForBands[which], '%')
  yield measured(`typical: what one wedge print says of the next print, median${suffix[which]}`, quantile(next, 0.5), 'L*')
  if (which === 'first') yield measured('fit of 384 patches, median', quantile(seconds, 0.5), 's', 1)
}

const truthAt = (system: PrintedBench, i: number): number => system.lightness(i / (responsePoints - 1))
const isWithin = (value: number, low: number, high: number): boolean => value >= low && value <= high

function isHeldEverywhere(system: PrintedBench, { lowOfAll, highOfAll }: WedgeFit): boolean {
  for (let i = 0; i < responsePoints; i += stride) if (!isWithin(truthAt(system, i), lowOfAll[i]!, highOfAll[i]!)) return false
  return true
}

function countHeld(system: PrintedBench, { low, high }: WedgeFit, counts: Map<string, { inside: number, all: number }>): void {
  const [black, white] = [truthAt(system, 0), truthAt(system, responsePoints - 1)]
  const note = (name: string, isInside: boolean): void => {
    const { inside, all } = counts.get(name) ?? { inside: 0, all: 0 }
    counts.set(name, { inside: inside + Number(isInside), all: all + 1 })
  }
  for (let i = 0; i < responsePoints; i += stride) {
    const truth = truthAt(system, i)
    const isInside = isWithin(truth, low[i]!, high[i]!)
    note('all tones', isInside)
    const tone = (truth - black) / (white - black)
    for (const [name, [from, to]] of Object.entries(regions)) if (tone >= from && tone < to) note(name, isInside)
  }
}

/** Sound shadows called reversed, and reversed ones found. */
async function* reversals(): AsyncGenerator<Measure> {
  let [alarms, found, nearStart] = [0, 0, 0]
  for (let seed = 0; seed < systemsForReversal; seed++) {
    const random = seededRandom(3000 + seed)
    const sound = drawSystem(random)
    const reversed = withReversal(sound, reversalDip, 0.08 + 0.1 * random.uniform())
    if (fitWedge([simulators.first.print(sound, seed, 'typical', random)]).reversal) alarms++
    const { reversal } = fitWedge([simulators.first.print(reversed.bench, seed, 'typical', random)])
    if (reversal) found++
    if (reversal && Math.abs(reversal.level - reversed.darkestLevel) < 0.03) nearStart++
    await pause()
  }
  const detections = 100 * found / systemsForReversal
  yield measured('reversal: false alarms in sound systems', 100 * alarms / systemsForReversal, '%', 2)
  yield { name: `reversal: found at a dip of ${reversalDip} L*`, value: detections, unit: '%', goal: 95, ok: detections >= 95, reason: 'goal at least 95' }
  yield measured('reversal: of those found, curve starts within 3 % ink of the darkest level', 100 * nearStart / Math.max(1, found), '%')
}

/** Several prints of one system, each with its own exposure and coating: errors, time. */
async function* pooling(): AsyncGenerator<Measure> {
  const [errors, seconds]: [number[], number[]] = [[], []]
  for (let seed = 0; seed < 20; seed++) {
    const random = seededRandom(4000 + seed)
    const system = drawSystem(random)
    const prints = Array.from({ length: pooledPrints }, () => {
      const shift = { exposure: 0.02 * random.normal(), coating: 0.01 * random.normal() }
      const shifted: PrintedBench = { lightness: (level, d = { exposure: 0, coating: 0 }) => system.lightness(level, { exposure: d.exposure + shift.exposure, coating: d.coating + shift.coating }) }
      return simulators.first.print(shifted, seed, 'typical', random)
    })
    const { fit, fitSeconds } = timed(prints)
    errors.push(rampErrors(system, curveLevels(fit.response, 'even-lightness')).greatest)
    seconds.push(fitSeconds)
    await pause()
  }
  yield measured(`${pooledPrints} pooled prints of 384 patches, each with its own exposure and coating: error, median`, quantile(errors, 0.5), 'L*')
  yield measured(`fit of ${pooledPrints} pooled prints, median`, quantile(seconds, 0.5), 's', 3)
}

function simulate(which: keyof typeof simulators, seed: number, level: QualityLevel): { system: PrintedBench, fit: WedgeFit, fitSeconds: number, random: SeededRandom } {
  const random = seededRandom(seed)
  const system = simulators[which].draw(random)
  return { system, random, ...timed([simulators[which].print(system, seed, level, random)]) }
}

/** The time is the thread's own, as if it had a core to itself. */
function timed(prints: readonly WedgePrint[]): { fit: WedgeFit, fitSeconds: number } {
  const started = process.cpuUsage()
  const fit = fitWedge(prints)
  return { fit, fitSeconds: process.cpuUsage(started).user / 1e6 }
}

function quantile(values: readonly number[], share: number): number {
  const sorted = [...values].sort((a, b) => a - b)
  return sorted[Math.min(sorted.length - 1, Math.floor(share * sorted.length))]!
}

/** Lets the process hear signals between two fits. */
const pause = (): Promise<void> => new Promise(resolve => setImmediate(resolve))
