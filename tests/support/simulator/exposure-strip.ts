import type { SeededRandom } from '../../../shared/calibration/random'
import type { PatchPlan, PrintQuality } from './print'
import { printPatches } from './print'
import type { PrintSystem } from './system'

/** A strip of exposures through clear film: step lengths in log₁₀, and where its first step lies against the base exposure. */
export interface StripPlan { steps: number, stepLog: number, firstLog: number }
export interface StripValue { exposureSeconds: number, lightness: number }

/** A step of the strip and the half of a sheet that the unevenness figures hold for, mm. */
const step = { widthMm: 14, heightMm: 25 }
const halfSheet = { widthMm: 84, heightMm: 56 }
/** The inner 75 % of a step is read, in so many parts, so that mottle evens out over it as on paper. */
const readShare = 0.75
const parts = { columns: 3, rows: 5 }
/** What the simulator's base exposure lasts. */
export const simulatedBaseSeconds = 240

/** One print of an exposure strip, once in order and once in reverse order below it; values come in the order of the first row, then of the second. */
export function printExposureStrip(system: PrintSystem, { steps, stepLog, firstLog }: StripPlan, quality: PrintQuality, random: SeededRandom): StripValue[] {
  const places = Array.from({ length: 2 * steps }, (_, i) => ({ row: Math.floor(i / steps), column: i % steps }))
  const exposures = places.map(({ row, column }) => firstLog + stepLog * (row === 0 ? column : steps - 1 - column))
  const plan = places.flatMap(({ row, column }, i) => partsOf((column + 0.5 - steps / 2) * step.widthMm, (row - 0.5) * step.heightMm).map(part => ({ ...part, exposure: exposures[i]! })))
  const lightnesses = printPatches(system, plan, quality, random)
  const count = parts.columns * parts.rows
  return exposures.map((exposure, i) => ({
    exposureSeconds: simulatedBaseSeconds * 10 ** exposure,
    lightness: lightnesses.slice(i * count, (i + 1) * count).reduce((sum, l) => sum + l, 0) / count,
  }))
}

function partsOf(centreX: number, centreY: number): PatchPlan[] {
  const [width, height] = [readShare * step.widthMm / parts.columns, readShare * step.heightMm / parts.rows]
  return Array.from({ length: parts.columns * parts.rows }, (_, k) => {
    const xMm = centreX + (k % parts.columns - (parts.columns - 1) / 2) * width
    const yMm = centreY + (Math.floor(k / parts.columns) - (parts.rows - 1) / 2) * height
    return { level: 0, x: xMm / halfSheet.widthMm, y: yMm / halfSheet.heightMm, xMm, yMm, pixels: width * height * (300 / 25.4) ** 2 }
  })
}

/** log₁₀ of the exposure over the system's base exposure at which clear film prints within `within` L* of the deepest tone there is. */
export function trueBaseLog(system: PrintSystem, within = 1): number {
  const black = system.lightness(0, { exposure: 20, coating: 0 })
  let [low, high] = [-5, 20]
  for (let i = 0; i < 80; i++) {
    const middle = (low + high) / 2
    if (system.lightness(0, { exposure: middle, coating: 0 }) > black + within) low = middle
    else high = middle
  }
  return high
}
