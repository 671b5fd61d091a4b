import { ComputeError } from '../errors'
import { positionOf, responsePoints, valueAt } from '../tone/response'
import { cubicBasis, combine, differencePenalty } from './bspline'
import { isotonic } from './isotonic'
import type { ResponseFit } from './response-fit'
import { fitResponse } from './response-fit'
import { normalEquations, penalisedFit } from './spline-candidates'
import type { TabletStep } from './step-tablet'

/** A response with its pointwise 95 % band, 1025 L* each. */
export interface BandedResponse { response: ArrayLike<number>, low: ArrayLike<number>, high: ArrayLike<number> }

/** What an ink level holds back of the UV, as a density against the tablet's, with its standard deviation. */
export interface FilmDensity { level: number, density: number, deviation: number }

/** Print lightness behind tablet densities 0 … `greatest`. */
interface TabletResponse extends BandedResponse { greatest: number }

const levelsKept = 65
/** Half width of a 95 % band in standard deviations: the normal quantile. */
const halfWidth = 1.96
/** No density is told better than this: a national laboratory's own k = 2 figure for tablets is 0.006 (NIST SP 250-99, 2022). */
const leastDeviation = 0.003
const splines = 14
const smoothings = Array.from({ length: 17 }, (_, i) => 10 ** (-4 + i / 2))

/**
 * Splits film from paper: on one print, the tablet density that prints as light as an ink level is that level's effective
 * UV density on this film under this lamp. Its deviation comes from both bands through the tablet's slope, so it is great
 * where the print is flat, in black and white. A smooth, never-falling curve through all levels (P-spline weighed by the
 * deviations, second differences, restricted likelihood) carries what is told well into those ends. 65 levels.
 * @throws ComputeError as `fitResponse` for the tablet's steps; `range_too_small` where wedge and tablet share no tones.
 */
export function splitFilmFromPaper(wedge: BandedResponse, steps: readonly TabletStep[]): FilmDensity[] {
  const tablet = tabletResponse(steps)
  const seen = Array.from({ length: levelsKept }, (_, i) => densityAt(i / (levelsKept - 1), wedge, tablet))
  if (seen.filter(s => s.deviation < 0.1).length < 5) throw new ComputeError('range_too_small', 'The tablet and the wedge share too few tones. Print both together at one exposure.')
  const smooth = isotonic(smoothThrough(seen).map(d => Math.max(0, d)))
  return seen.map(({ level, deviation }, i) => ({ level, density: smooth[i]!, deviation }))
}

/** Levels are tablet densities over the greatest one, so a tablet is fitted as any reading. */
function tabletResponse(steps: readonly TabletStep[]): TabletResponse & ResponseFit {
  const greatest = Math.max(...steps.map(s => s.density))
  return { ...fitResponse(steps.map(({ density, lightness }) => ({ level: density / greatest, lightness }))), greatest }
}

function densityAt(level: number, wedge: BandedResponse, tablet: TabletResponse): FilmDensity {
  const lightness = valueAt(wedge.response, level)
  const half = (of: BandedResponse, at: number): number => (valueAt(of.high, at) - valueAt(of.low, at)) / 2
  const position = positionOf(tablet.response, lightness)
  const spread = Math.hypot(half(wedge, level), half(tablet, position))
  const [low, high] = [positionOf(tablet.response, lightness - spread), positionOf(tablet.response, lightness + spread)]
  const isAtEnd = low <= 0 || high >= 1
  return { level, density: tablet.greatest * position, deviation: Math.max(leastDeviation, tablet.greatest * (high - low) / 2 / halfWidth) * (isAtEnd ? 3 : 1) }
}

function smoothThrough(seen: readonly FilmDensity[]): Float64Array {
  const basis = cubicBasis(seen.map(s => s.level), splines)
  const weighed = basis.map((v, at) => v / seen[Math.floor(at / splines)]!.deviation)
  const equations = normalEquations(weighed, Float64Array.from(seen, s => s.density / s.deviation), splines)
  const penalty = { matrix: differencePenalty(splines, 2), splines, order: 2 }
  const fits = smoothings.map(smoothing => penalisedFit(equations, penalty, smoothing))
  return combine(basis, fits.reduce((a, b) => b.criterion < a.criterion ? b : a).coefficients)
}

/**
 * What one paper's film densities may be off by on another paper of the same process family under the same lamp, as its
 * sensitizer takes other parts of the lamp's light: an assumption of ours, no source.
 */
export const assumedTransferDeviation = 0.02

/**
 * The response of a new paper from its own tablet strip and the film's densities: each ink level prints as the tablet does at
 * its density. The band joins the tablet's own with the film's deviations and the stated transfer. Both papers must be
 * of one process family and under one lamp.
 * @throws ComputeError as `fitResponse` for the tablet's steps.
 */
export function responseThroughFilm(film: readonly FilmDensity[], steps: readonly TabletStep[]): { response: Float64Array, low: Float64Array, high: Float64Array } {
  const tablet = tabletResponse(steps)
  const [densities, deviations] = [film.map(f => f.density), film.map(f => f.deviation)]
  const at = (level: number) => {
    const density = valueAt(densities, level)
    const spread = halfWidth * Math.hypot(valueAt(deviations, level), assumedTransferDeviation)
    const print = (of: ArrayLike<number>, d: number): number => valueAt(of, d / tablet.greatest)
    const middle = print(tablet.response, density)
    const below = Math.hypot(middle - print(tablet.low, density), middle - print(tablet.response, density - spread))
    const above = Math.hypot(print(tablet.high, density) - middle, print(tablet.response, density + spread) - middle)
    return { middle, low: Math.max(0, middle - below), high: Math.min(100, middle + above) }
  }
  const points = Array.from({ length: responsePoints }, (_, i) => at(i / (responsePoints - 1)))
  return { response: isotonic(points.map(p => p.middle)), low: isotonic(points.map(p => p.low)), high: isotonic(points.map(p => p.high)) }
}
