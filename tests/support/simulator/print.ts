import type { SeededRandom } from '../../../shared/calibration/random'
import { valueAt } from '../../../shared/tone/response'
import type { PrintedBench } from './system'

/** How evenly a print was made. Lightness figures hold at the tone where the coating shows most. */
export interface PrintQuality {
  /** L* from the middle to either edge along the coating's run */
  gradient: number
  /** L*, standard deviation of the mottle */
  mottle: number
  /** L*, standard deviation of one pixel at 300 per inch */
  texture: number
  /** share of light lost in the corners */
  fallOff: number
}
export const printQualities = {
  careful: { gradient: 1, mottle: 0.5, texture: 2, fallOff: 0.05 },
  typical: { gradient: 2, mottle: 1, texture: 3, fallOff: 0.1 },
  rough: { gradient: 3, mottle: 2, texture: 4, fallOff: 0.15 },
} satisfies Record<string, PrintQuality>
export type QualityLevel = keyof typeof printQualities

/** A patch to print: its level, its place and how many pixels of 300 per inch are read of it; `exposure` is log₁₀ of its own exposure over the base exposure. */
export interface PatchPlan { level: number, x: number, y: number, xMm: number, yMm: number, pixels: number, exposure?: number }

/**
 * Lightness of every patch on one print of a system: coating gradient and mottle, texture, light that falls off from a centre.
 * Gradient and light are even on the whole: what a print has more or less of both counts as print-to-print, not as this. The
 * mottle keeps the mean that chance gives it, as nothing on one print tells it from tone.
 */
export function printPatches(system: PrintedBench, plan: readonly PatchPlan[], quality: PrintQuality, random: SeededRandom): number[] {
  const perLightness = 1 / greatestCoatingEffect(system)
  const direction = 2 * Math.PI * random.uniform()
  const mottle = mottleField(random)
  const [centreX, centreY] = [0.3 * random.normal(), 0.3 * random.normal()]
  const coatings = plan.map(({ x, y, xMm, yMm }) =>
    perLightness * (quality.gradient * (x * Math.cos(direction) + y * Math.sin(direction)) + quality.mottle * mottle(xMm, yMm)))
  const exposures = withoutMean(plan.map(({ x, y }) => Math.log10(1 - Math.min(0.6, quality.fallOff * ((x - centreX) ** 2 + (y - centreY) ** 2) / 2))))
  return plan.map(({ level, pixels, exposure = 0 }, i) => {
    const texture = perLightness * quality.texture / Math.sqrt(pixels) * random.normal()
    return system.lightness(level, { coating: coatings[i]! + texture, exposure: exposure + exposures[i]! })
  })
}

function withoutMean(values: readonly number[]): number[] {
  const mean = values.reduce((sum, v) => sum + v, 0) / values.length
  return values.map(v => v - mean)
}

/** L* by which the tone that shows it most changes when the coating doubles, to first order. */
function greatestCoatingEffect(system: PrintedBench): number {
  const small = 1e-4
  const effects = Array.from({ length: 101 }, (_, i) => Math.abs(system.lightness(i / 100, { exposure: 0, coating: small }) - system.lightness(i / 100)) / small)
  return Math.max(...effects)
}

/** Waves that make up the mottle; many, so that it is near to normal. */
const waves = 60

/** A smooth random field of standard deviation 1 that keeps its value over some 6 to 15 mm, drawn out along the brush. */
function mottleField(random: SeededRandom): (xMm: number, yMm: number) => number {
  const [reachX, reachY] = [6 + 9 * random.uniform(), 6 + 9 * random.uniform()]
  const parts = Array.from({ length: waves }, () => ({ x: random.normal() / reachX, y: random.normal() / reachY, phase: 2 * Math.PI * random.uniform() }))
  return (xMm, yMm) => Math.sqrt(2 / waves) * parts.reduce((sum, p) => sum + Math.cos(p.x * xMm + p.y * yMm + p.phase), 0)
}

/**
 * Greatest |ΔL*| of a ramp printed evenly by the system through a curve, against the straight line between the bench's own
 * deepest tone and paper; `levels` are the curve's levels at equal steps of tone.
 */
export function rampErrors(system: PrintedBench, levels: ArrayLike<number>): { greatest: number, mean: number } {
  const [black, white] = [system.lightness(0), system.lightness(1)]
  const errors = Array.from({ length: 256 }, (_, i) => Math.abs(system.lightness(valueAt(levels, i / 255)) - (black + (white - black) * i / 255)))
  return { greatest: Math.max(...errors), mean: errors.reduce((a, b) => a + b, 0) / errors.length }
}
