import type { SeededRandom } from '../../../shared/calibration/random'
import type { WedgeLayout } from '../../../shared/calibration/wedge-layout'
import type { WedgePatch } from '../../../shared/calibration/wedge-print'
import type { QualityLevel } from '../simulator/print'
import type { PrintedBench } from '../simulator/system'

/** How a print of the other make is uneven; shares of the coating, light and lightness. */
interface Unevenness {
  /** standard deviation of one brush mark's coating */
  brush: number
  /** of blotches that keep their value over some 10 mm, rough like paper pulp */
  blotches: number
  /** of a patch's own coating, with the long tails of Student's t of 4 degrees of freedom */
  patch: number
  /** share of light between the tubes and towards the sides */
  light: number
}
const unevenness: Record<QualityLevel, Unevenness> = {
  careful: { brush: 0.008, blotches: 0.006, patch: 0.0025, light: 0.03 },
  typical: { brush: 0.016, blotches: 0.012, patch: 0.0035, light: 0.06 },
  rough: { brush: 0.025, blotches: 0.024, patch: 0.005, light: 0.1 },
}
/** Standard deviation of a scanner's own error on a patch, L*. */
const readingNoise = 0.06

/** One print of a scattered wedge: brush marks side by side, each with its own coating, pulp-like blotches, tubes of light. */
export function printWedgeOtherwise(bench: PrintedBench, layout: WedgeLayout, level: QualityLevel, random: SeededRandom): WedgePatch[] {
  const amount = unevenness[level]
  const places = layout.cells.map(({ level, x, y }) => ({ level, x, y, xMm: x * layout.widthMm / 2, yMm: y * layout.heightMm / 2 }))
  const [brush, blotches, light] = [brushMarks(random), pulp(random), tubes(random)]
  const brushed = withoutMean(places.map(({ xMm, yMm }) => amount.brush * brush(xMm, yMm)))
  const coatings = places.map(({ xMm, yMm }, i) => brushed[i]! + amount.blotches * blotches(xMm, yMm))
  const exposures = withoutMean(places.map(({ xMm, yMm }) => Math.log10(1 - amount.light * light(xMm, yMm))))
  return places.map((place, i) => {
    const coating = coatings[i]! + amount.patch * studentT4(random)
    const lightness = bench.lightness(place.level, { coating, exposure: exposures[i]! }) + readingNoise * random.normal()
    return { ...place, lightness }
  })
}

/** Marks of a 25 to 45 mm brush side by side, at a small angle; each has its own amount, and runs out along its way. */
function brushMarks(random: SeededRandom): (xMm: number, yMm: number) => number {
  const [width, angle, start] = [25 + 20 * random.uniform(), 0.15 * random.normal() + (random.below(2) ? Math.PI / 2 : 0), 40 * random.uniform()]
  const amounts = Array.from({ length: 24 }, () => random.normal())
  const runOut = 0.6 * random.normal()
  return (xMm, yMm) => {
    const [across, along] = [Math.cos(angle) * yMm - Math.sin(angle) * xMm, Math.cos(angle) * xMm + Math.sin(angle) * yMm]
    const mark = Math.floor((across + start) / width)
    return amounts[(mark + 12) % 24]! + runOut * along / 84 * (mark % 2 ? 1 : -1)
  }
}

/** Sums of three lattices of random values, 30, 15 and 7.5 mm apart, each with half of the last one's variance. */
function pulp(random: SeededRandom): (xMm: number, yMm: number) => number {
  const lattices = [30, 15, 7.5].map((spacing, i) => ({ spacing, values: Float64Array.from({ length: 4096 }, () => random.normal() * Math.sqrt(0.5 ** i / 1.75) * 1.5) }))
  return (xMm, yMm) => lattices.reduce((sum, { spacing, values }) => sum + between(values, xMm / spacing + 32.5, yMm / spacing + 32.5), 0)
}

function between(values: Float64Array, u: number, v: number): number {
  const [i, j] = [Math.floor(u), Math.floor(v)]
  const [p, q] = [u - i, v - j]
  const at = (row: number, column: number): number => values[64 * row + column]!
  return (1 - q) * ((1 - p) * at(j, i) + p * at(j, i + 1)) + q * ((1 - p) * at(j + 1, i) + p * at(j + 1, i + 1))
}

/** Light of a row of tubes: weaker between them and towards one side; 0 where it is strongest, about 1 where it is least. */
function tubes(random: SeededRandom): (xMm: number, yMm: number) => number {
  const [spacing, phase, side] = [50 + 30 * random.uniform(), 2 * Math.PI * random.uniform(), random.uniform() < 0.5 ? 1 : -1]
  return (xMm, yMm) => 0.25 * (1 - Math.cos(2 * Math.PI * yMm / spacing + phase)) / 2 + 0.75 * ((side * xMm + 84) / 168) ** 2
}

/** Student's t of 4 degrees of freedom, scaled to standard deviation 1. */
function studentT4(random: SeededRandom): number {
  const square = Array.from({ length: 4 }, () => random.normal() ** 2).reduce((a, b) => a + b, 0)
  return random.normal() / Math.sqrt(square / 4) / Math.SQRT2
}

function withoutMean(values: readonly number[]): number[] {
  const mean = values.reduce((sum, v) => sum + v, 0) / values.length
  return values.map(v => v - mean)
}
