import { factorise, solveLower, solveUpper } from './cholesky'
import type { ExposureCurve } from './exposure-curves'
import { exposureCurves } from './exposure-curves'
import type { SquaresFit } from './levenberg-marquardt'
import { leastSquares } from './levenberg-marquardt'
import type { SeededRandom } from './random'
import { seededRandom } from './random'

/** One step of a strip: log₁₀ of its exposure in seconds, absolute density of its print. */
export interface StripStep { logExposure: number, density: number }

/** A strip's curve D_w + (D_max − D_w)·s(e^lnk·(x − x₀)) that could be the true one, and how much it counts; weights add up to 1. */
export interface StripCurve { curve: ExposureCurve, x0: number, slope: number, shape: number, deepest: number, paper: number, weight: number }

/** A normal prior. */
interface Prior { mean: number, deviation: number }

/** ln of the slope by the natural logarithm of odds in log₁₀ exposure, and of the shape. The slope's prior spans exposure scales of about 1 to 6. */
const slopePrior: Prior = { mean: Math.log(3.6), deviation: 0.45 }
const shapePriors: Record<keyof typeof exposureCurves, Prior> = { richards: { mean: 0.3, deviation: 3 }, turned: { mean: -2, deviation: 3 } }
/** Deviation of the deepest density about the mean of the strip's longest exposures' quarter. */
const deepestDeviation = 0.02
/** Density of coated, cleared paper; common practice, no source. */
const paperPrior: Prior = { mean: 0.07, deviation: 0.03 }

/** What makes steps differ that should not: share of the coating, log exposure, density. Of a typical print; the strip tells how far it is from one. */
const scatter = { coating: 0.03, exposure: 0.015, reading: 0.004 }
/** ln of this strip's scatter over a typical one's. */
const scatterPrior: Prior = { mean: 0, deviation: 0.7 }

/** Curves drawn for each family, from Student's t with so many degrees of freedom; before, draws to which the proposal adapts. */
const drawCount = 1500
const adaptingDraws = [500, 500, 500]
const freedom = 5
const shapeStarts = [0, -1.5, 1.5]
const reweightings = 3

/** Parameters in the order x₀, ln slope, ln shape, deepest and paper density, ln scatter. */
type Parameters = Float64Array

/**
 * The curves that a strip of exposures allows, from both families, each weighed by its posterior probability (importance
 * sampling, Geweke, Econometrica 57(6):1317–1339, 1989; the proposal starts at the family's best penalised fit and adapts). Steps in any order; the
 * same steps give the same curves.
 */
export function stripPosterior(steps: readonly StripStep[]): StripCurve[] {
  const random = seededRandom(1)
  const drawn = (Object.keys(exposureCurves) as Family[]).flatMap(family => drawFamily(stripModel(steps, family), random))
  const most = drawn.reduce((max, d) => Math.max(max, d.logWeight), -Infinity)
  const weights = drawn.map(d => Math.exp(d.logWeight - most))
  const sum = weights.reduce((a, b) => a + b, 0)
  return drawn.map(({ curve, at }, i) => ({ curve, x0: at[0]!, slope: Math.exp(at[1]!), shape: Math.exp(at[2]!), deepest: at[3]!, paper: at[4]!, weight: weights[i]! / sum }))
}

type Family = keyof typeof exposureCurves
interface StripModel {
  curve: ExposureCurve
  /** steps */
  count: number
  start: Parameters
  /** standard deviation of each step's density about a curve */
  deviations: (at: Parameters) => Float64Array
  /** differences from the curve over given deviations, then from the priors' means over theirs */
  residuals: (at: Parameters, deviations: Float64Array) => Float64Array
  /** ln of the widths that the family's priors do not share */
  logWidth: number
}

function stripModel(steps: readonly StripStep[], family: Family): StripModel {
  const curve = exposureCurves[family]
  const sorted = [...steps].sort((a, b) => a.logExposure - b.logExposure || a.density - b.density)
  const priors = priorsOf(sorted, family)
  const net = ([x0, slope, shape, deepest, paper]: Parameters, x: number): number => (deepest! - paper!) * curve.share(Math.exp(slope!) * (x - x0!), Math.exp(shape!))
  const steepness = ([x0, slope, shape, deepest, paper]: Parameters, x: number): number =>
    (deepest! - paper!) * Math.exp(slope!) * curve.slope(Math.exp(slope!) * (x - x0!), Math.exp(shape!))
  return {
    curve, count: sorted.length, logWidth: Math.log(shapePriors[family].deviation),
    start: Float64Array.of(halfwayExposure(sorted), slopePrior.mean, shapePriors[family].mean, priors[3]!.mean, priors[4]!.mean, scatterPrior.mean),
    deviations: at => Float64Array.from(sorted, ({ logExposure }) => Math.exp(at[5]!) * Math.hypot(scatter.reading, scatter.coating * net(at, logExposure), scatter.exposure * steepness(at, logExposure))),
    residuals: (at, deviations) => Float64Array.of(
      ...sorted.map(({ logExposure, density }, i) => (density - at[4]! - net(at, logExposure)) / deviations[i]!),
      ...priors.map(({ mean, deviation }, k) => (at[k]! - mean) / deviation)),
  }
}

function priorsOf(sorted: readonly StripStep[], family: Family): Prior[] {
  const xs = sorted.map(s => s.logExposure)
  const middle = mean(xs)
  const longest = sorted.slice(-Math.max(1, sorted.length >> 2)).map(s => s.density)
  return [
    { mean: middle, deviation: Math.sqrt(mean(xs.map(x => (x - middle) ** 2))) },
    slopePrior, shapePriors[family], { mean: mean(longest), deviation: deepestDeviation }, paperPrior, scatterPrior,
  ]
}

const mean = (values: readonly number[]): number => values.reduce((a, b) => a + b, 0) / values.length

/** The exposure of the step whose density is nearest to the middle of all. */
function halfwayExposure(sorted: readonly StripStep[]): number {
  const densities = sorted.map(s => s.density)
  const half = (Math.max(...densities) + Math.min(...densities)) / 2
  return sorted.reduce((best, s) => Math.abs(s.density - half) < Math.abs(best.density - half) ? s : best).logExposure
}

/** The best penalised fit from several shapes; the steps' deviations follow the curve and the scatter found before. */
function bestFit(model: StripModel): SquaresFit {
  const fits = shapeStarts.map((shift) => {
    let fit: SquaresFit | undefined
    for (let round = 0; round < reweightings; round++) {
      const from: Parameters = fit ? withScatter(model, fit.at) : model.start.map((v, k) => k === 2 ? v + shift : v)
      const deviations = model.deviations(from)
      fit = leastSquares(at => pinned(model.residuals(at, deviations), at, from), from)
    }
    return fit!
  })
  return fits.reduce((a, b) => logPosterior(model, b.at) > logPosterior(model, a.at) ? b : a)
}

/** The scatter holds still in a round: in place of its prior, the last residual is how far it has moved. */
const pinned = (residuals: Float64Array, at: Parameters, from: Parameters): Float64Array => residuals.map((r, i) => i === residuals.length - 1 ? at[5]! - from[5]! : r)

/** ln of the scatter that the residuals show, drawn to the typical by its prior as by so many steps more. */
function withScatter(model: StripModel, at: Parameters): Parameters {
  const squares = model.residuals(at, model.deviations(at)).slice(0, model.count).reduce((sum, r) => sum + r * r, 0)
  const [seen, freedom] = [Math.log(Math.max(1e-4, squares / model.count)) / 2, 2 * model.count]
  return at.map((v, k) => k === 5 ? (v + seen) * freedom / (freedom + scatterPrior.deviation ** -2) : v)
}

function logPosterior(model: StripModel, at: Parameters): number {
  const deviations = model.deviations(at)
  const squares = model.residuals(at, deviations).reduce((sum, r) => sum + r * r, 0)
  return -squares / 2 - deviations.reduce((sum, d) => sum + Math.log(d), 0) - model.logWidth
}

interface Draw { curve: ExposureCurve, at: Parameters, logWeight: number }
/** Student's t about a mean; `factor` is the Cholesky factor of its scale matrix. */
interface Proposal { mean: Parameters, factor: Float64Array }

/** Draws whose proposal has adapted to them: the posterior is bent, and draws about its peak alone would miss most of it. */
function drawFamily(model: StripModel, random: SeededRandom): Draw[] {
  const best = bestFit(model)
  let proposal: Proposal = { mean: best.at, factor: factorise(firstScale(best.factor, best.at.length, model.count), best.at.length) }
  for (const count of adaptingDraws) proposal = adapted(drawFrom(model, proposal, count, random), proposal)
  return drawFrom(model, proposal, drawCount, random)
}

function drawFrom(model: StripModel, { mean: centre, factor }: Proposal, count: number, random: SeededRandom): Draw[] {
  const n = centre.length
  const logScale = centre.reduce((sum, _, k) => sum + Math.log(factor[k * n + k]!), 0)
  return Array.from({ length: count }, () => {
    const normal = Float64Array.from(centre, () => random.normal())
    const square = normal.reduce((sum, z) => sum + z * z, 0)
    const stretch = freedom / chiSquare(random, freedom)
    const at = centre.map((v, i) => {
      let step = 0
      for (let k = 0; k <= i; k++) step += factor[i * n + k]! * normal[k]!
      return v + Math.sqrt(stretch) * step
    })
    const logProposal = -logScale - (freedom + n) / 2 * Math.log1p(square * stretch / freedom)
    const log = logPosterior(model, at)
    return { curve: model.curve, at, logWeight: Number.isFinite(log) ? log - logProposal : -Infinity }
  })
}

/** The proposal with the draws' own mean and covariance; their weights' square roots, so that no few draws rule. */
function adapted(draws: readonly Draw[], before: Proposal): Proposal {
  const n = before.mean.length
  const most = draws.reduce((max, d) => Math.max(max, d.logWeight), -Infinity)
  const weights = draws.map(d => Math.exp((d.logWeight - most) / 2))
  const sum = weights.reduce((a, b) => a + b, 0)
  const centre = before.mean.map((_, k) => draws.reduce((total, d, i) => total + weights[i]! * d.at[k]!, 0) / sum)
  const covariance = Float64Array.from({ length: n * n }, (_, at) => {
    const [i, j] = [Math.floor(at / n), at % n]
    const value = draws.reduce((total, d, k) => total + weights[k]! * (d.at[i]! - centre[i]!) * (d.at[j]! - centre[j]!), 0) / sum
    return i === j ? value + 1e-10 : value
  })
  return { mean: centre, factor: factorise(covariance, n) }
}

/** Covariance about the best fit; that of the scatter, which it holds still, as of so many normal residuals. */
function firstScale(factor: Float64Array, n: number, count: number): Float64Array {
  const scale = inverse(factor, n)
  for (let k = 0; k < n; k++) scale[k * n + 5] = scale[5 * n + k] = 0
  scale[5 * n + 5] = 1 / (2 * count)
  return scale
}

/** The inverse of the matrix whose Cholesky factor is given, by rows. */
function inverse(factor: Float64Array, n: number): Float64Array {
  const columns = Array.from({ length: n }, (_, k) => solveUpper(factor, n, solveLower(factor, n, Float64Array.from({ length: n }, (_, i) => Number(i === k)))))
  return Float64Array.from({ length: n * n }, (_, at) => columns[at % n]![Math.floor(at / n)]!)
}

function chiSquare(random: SeededRandom, degrees: number): number {
  let sum = 0
  for (let i = 0; i < degrees; i++) sum += random.normal() ** 2
  return sum
}
