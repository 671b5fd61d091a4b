import { findBaseExposure } from '#shared/calibration/base-exposure'
import { seededRandom } from '#shared/calibration/random'
import { printExposureStrip, simulatedBaseSeconds, trueBaseLog, type StripValue } from '../../../tests/support/simulator/exposure-strip'
import { printQualities } from '../../../tests/support/simulator/print'
import { drawSystem } from '../../../tests/support/simulator/system'
import { measured, type Measure } from './suite'

const strips = 240
const steps = 10
const halfStopLog = Math.log10(2) / 2
/** By eye two dark steps look alike within so much, L*. */
const alikeByEye = 1.5
const rmsGoal = 0.26
const shareOfByEye = 0.6

/**
 * Base exposures found on simulated strips: 10 half-stop steps, repeated in reverse order, with typical unevenness; the
 * base exposure lies at the sixth to the ninth step. Beside them, on the same strips, the rule of the eye: of the steps darker than the
 * middle the first that is within 1.5 L* of the next longer one, equal times averaged. Seeded.
 */
export async function* run(): AsyncGenerator<Measure> {
  const [ours, byEye, milliseconds]: number[][] = [[], [], []]
  let held = 0
  for (let seed = 0; seed < strips; seed++) {
    const random = seededRandom(seed)
    const system = drawSystem(random)
    const truth = trueBaseLog(system)
    const values = printExposureStrip(system, { steps, stepLog: halfStopLog, firstLog: truth - (5 + 3 * random.uniform()) * halfStopLog }, printQualities.typical, random)
    const started = performance.now()
    const found = findBaseExposure(values)
    milliseconds!.push(performance.now() - started)
    const trueSeconds = simulatedBaseSeconds * 10 ** truth
    ours!.push(Math.log2(found.exposureSeconds / trueSeconds))
    byEye!.push(Math.log2(secondsByEye(values) / trueSeconds))
    if (found.exposureSecondsLow <= trueSeconds && trueSeconds <= (found.exposureSecondsHigh ?? Infinity)) held++
    await pause()
  }
  yield measured(`base exposure, rms over ${strips} strips`, rms(ours!), 'stop', rmsGoal)
  yield measured('by eye on the same strips, rms', rms(byEye!), 'stop')
  yield measured('base exposure over by eye', rms(ours!) / rms(byEye!), 'share', shareOfByEye)
  yield measured('95 % bounds hold the truth', 100 * held / strips, '%')
  yield measured('time of one strip, median', [...milliseconds!].sort((a, b) => a - b)[strips >> 1]!, 'ms')
}

function secondsByEye(values: readonly StripValue[]): number {
  const seconds = values.slice(0, steps).map(v => v.exposureSeconds)
  const lightnesses = seconds.map((_, i) => (values[i]!.lightness + values[2 * steps - 1 - i]!.lightness) / 2)
  const middle = (Math.max(...lightnesses) + Math.min(...lightnesses)) / 2
  const alike = lightnesses.findIndex((l, i) => l < middle && i + 1 < steps && l - lightnesses[i + 1]! <= alikeByEye)
  return alike < 0 ? seconds.at(-1)! : seconds[alike]!
}

const rms = (values: readonly number[]): number => Math.sqrt(values.reduce((sum, v) => sum + v * v, 0) / values.length)
/** Lets the process hear signals between two strips. */
const pause = (): Promise<void> => new Promise(resolve => setImmediate(resolve))
