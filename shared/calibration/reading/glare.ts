import { lightnessFromLuminance } from '../../tone/lightness'
import { solveLeastSquares } from './least-squares'
import type { Point } from './picture'

/** Light as X, Y, Z (D50, white's Y = 1). */
export type Light = readonly [number, number, number]

/** A place of known ink level with what was measured there and the mean light of squares around it, one for each radius. */
export interface GlareReference { atMm: Point, level: number, luminance: number, aroundLuminance: readonly number[] }

/** How much of the neighbourhood's light is in each measurement: a share for each radius, all 0 where none could be shown. */
export interface Glare { shares: readonly number[], total: number }

/** Half sides of the squares whose light is looked at, mm: together they make any kernel that falls off from the middle. */
export const glareRadiiMm = [4, 8, 16, 32] as const

/** Shares beyond this are no stray light but another fault. */
const greatestTotal = 0.15
/** Degree of the polynomial that stands for the print's response to ink levels. */
const responseDegree = 14
/** Improvement that the first radius, and each further one, must bring: an F value with one degree of freedom (z = 3.3 and 2.4). */
const believedImprovement = [11, 6] as const
/** Fewer references leave nothing to judge by. */
const leastReferences = 100
/** L* per luminance: dL/dY = 116³ / (3 (L + 16)²). */
const slopeScale = 116 ** 3 / 3
const scaleMm = 100

export const noGlare: Glare = { shares: glareRadiiMm.map(() => 0), total: 0 }

/**
 * Fits the shares of stray light: of two places with one ink level, the one with more light around it reads lighter. Measured
 * luminance is m = (1 − Σ sᵣ) y + Σ sᵣ nᵣ, nᵣ the mean light in the square of radius r; y is a polynomial of the ink level plus slow
 * unevenness of coating and lamp. Least squares in L*; radii are taken in one by one (forward selection) while each explains more than
 * chance would and no share turns negative. Levels must be scattered over the page.
 */
export function fitGlare(references: readonly GlareReference[]): Glare {
  if (references.length < leastReferences) return noGlare
  const base = references.map(baseRow)
  const values = references.map(r => r.luminance * slopeOf(r))
  let chosen: Candidate = { radii: [], shares: [], residual: residualSquare(base, values, solveLeastSquares(base, values, undefined, ridge)) }
  while (chosen.radii.length < glareRadiiMm.length) {
    const open = glareRadiiMm.map((_, i) => i).filter(i => !chosen.radii.includes(i))
    const best = open.map(radius => fitRadii(references, base, values, [...chosen.radii, radius])).reduce((a, b) => b.residual < a.residual ? b : a)
    const freedom = references.length - base[0]!.length - best.radii.length
    const improvement = (chosen.residual - best.residual) / (best.residual / freedom)
    if (!(improvement > believedImprovement[chosen.radii.length === 0 ? 0 : 1])) break
    chosen = best
  }
  const total = chosen.shares.reduce((sum, share) => sum + share, 0)
  return total > greatestTotal ? noGlare : { shares: glareRadiiMm.map((_, i) => chosen.shares[chosen.radii.indexOf(i)] ?? 0), total }
}

interface Candidate { radii: number[], shares: number[], residual: number }

/** The shares of some radii; a candidate with a negative share explains nothing. */
function fitRadii(references: readonly GlareReference[], base: number[][], values: number[], radii: number[]): Candidate {
  const rows = references.map((r, i) => [...base[i]!, ...radii.map(k => r.aroundLuminance[k]! * slopeOf(r))])
  const fit = solveLeastSquares(rows, values, undefined, ridge)
  const shares = Array.from(fit.subarray(base[0]!.length))
  return { radii, shares, residual: Math.min(...shares) < 0 ? Infinity : residualSquare(rows, values, fit) }
}

/** Keeps the normal equations sound without moving the answer. */
const ridge = 1e-7

const slopeOf = ({ luminance }: GlareReference): number => slopeScale / (lightnessFromLuminance(luminance) + 16) ** 2

/** What a print without stray light may do, in L*: any smooth response, a quadratic of coating in the darks and of light in the middle. */
function baseRow(reference: GlareReference): number[] {
  const slope = slopeOf(reference)
  const lightness = lightnessFromLuminance(reference.luminance)
  const [u, v] = [reference.atMm[0] / scaleMm, reference.atMm[1] / scaleMm]
  const tone = Math.min(1, lightness / 95)
  const position = [u, v, u * u, u * v, v * v]
  const x = 2 * reference.level - 1
  const response = [1, x]
  for (let i = 2; i <= responseDegree; i++) response.push(2 * x * response[i - 1]! - response[i - 2]!)
  return [...response.map(value => value * slope / 100), ...position.map(p => p * (1 - tone)), ...position.map(p => p * 4 * tone * (1 - tone))]
}

function residualSquare(rows: number[][], values: number[], fit: Float64Array): number {
  return rows.reduce((sum, row, i) => sum + (values[i]! - row.reduce((at, value, k) => at + value * fit[k]!, 0)) ** 2, 0)
}

/** A measured light without its stray share, from the mean light around it for each radius. Never below 0. */
export function withoutGlare(measured: Light, around: readonly Light[], { shares, total }: Glare): [number, number, number] {
  return measured.map((value, k) => {
    const stray = shares.reduce((sum, share, i) => sum + share * around[i]![k]!, 0)
    return Math.max(0, (value - stray) / (1 - total))
  }) as [number, number, number]
}
