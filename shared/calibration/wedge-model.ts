import { cubicBasis } from './bspline'
import { factorise, logDeterminant, solveLowerColumns } from './cholesky'
import type { FieldParameters } from './covariance'
import { smoothFields, withMottle } from './covariance'
import type { PrintSpread } from './print-spread'
import { assumedSpread, greatestShifts } from './print-spread'
import { splineCount, warpedAxes } from './smooth-fit'
import type { WeighedCandidate } from './spline-average'
import { weighCandidates } from './spline-average'
import type { SplineCandidate } from './spline-candidates'
import { splineCandidates } from './spline-candidates'
import type { ToneWeights } from './tone-weights'
import { toneWeights } from './tone-weights'
import { valueAt } from '../tone/response'
import type { WedgePrint } from './wedge-print'

/** Prints and a first fit, ready to be looked at with any mottle. */
export interface WedgeModel {
  /** −2 ln of the joint restricted likelihood of all candidates and of the mottle's prior, but for a constant */
  criterion: (field: FieldParameters) => number
  /** the candidates' weights with this mottle */
  average: (field: FieldParameters) => WeighedCandidate[]
  /** the splines of each axis at the 1025 levels */
  grids: Float64Array[]
}

/**
 * Steps 2 to 4 of the wedge fit. `first` is the first fit's response, `deviation` its residuals' standard deviation, L*.
 * What does not change with the mottle's parameters is made once. Several prints have each their own exposure and coating, by `spread`.
 */
export function wedgeModel(prints: readonly WedgePrint[], first: Float64Array, deviation: number, spread = assumedSpread): WedgeModel {
  const axes = warpedAxes(first)
  const shift = prints.length > 1 ? shiftOverNoise(first, deviation, spread) : undefined
  const parts = prints.map(print => partOf(print, first, axes, shift))
  const candidatesAt = (field: FieldParameters): SplineCandidate[] => {
    const whitened = parts.map(part => whiten(part, field, axes.length))
    const determinant = whitened.reduce((sum, w) => sum + w.determinant, 0)
    const bases = axes.map((_, axis) => joined(whitened.map(w => w.bases[axis]!)))
    return splineCandidates(bases, joined(whitened.map(w => w.lightnesses))).map(c => ({ ...c, criterion: c.criterion + determinant }))
  }
  return {
    criterion: field => jointCriterion(candidatesAt(field)) + priorOf(field),
    average: field => weighCandidates(candidatesAt(field)),
    grids: axes.map(axis => cubicBasis(axis, splineCount)),
  }
}

/** −2 ln Σ e^(−criterion/2). */
function jointCriterion(candidates: readonly SplineCandidate[]): number {
  const best = Math.min(...candidates.map(c => c.criterion))
  return best - 2 * Math.log(candidates.reduce((sum, c) => sum + Math.exp((best - c.criterion) / 2), 0))
}

/** −2 ln of the parameters' prior: normal, variance ratio e^(1 ± 2), reaches e^(2.5 ± 0.8) mm. */
const priorOf = ([variance, reachX, reachY]: FieldParameters): number =>
  ((variance - 1) / 2) ** 2 + ((reachX - 2.5) / 0.8) ** 2 + ((reachY - 2.5) / 0.8) ** 2

interface Part { print: WedgePrint, weights: ToneWeights, smooth: Float64Array, columns: Float64Array }

/** The columns to be whitened: every axis' splines, then the lightnesses; one row a patch. */
function partOf(print: WedgePrint, first: Float64Array, axes: readonly Float64Array[], shift: { exposure: number, coating: number } | undefined): Part {
  const weights = toneWeights(first, print.map(p => p.level))
  const width = axes.length * splineCount + 1
  const columns = new Float64Array(print.length * width)
  axes.forEach((axis, a) => {
    const basis = cubicBasis(print.map(p => valueAt(axis, p.level)), splineCount)
    print.forEach((_, row) => columns.set(basis.subarray(row * splineCount, (row + 1) * splineCount), row * width + a * splineCount))
  })
  print.forEach((patch, row) => columns[row * width + width - 1] = patch.lightness)
  return { print, weights, smooth: smoothFields(print, weights, shift), columns }
}

function whiten({ print, weights, smooth, columns }: Part, field: FieldParameters, axes: number) {
  const n = print.length
  const factor = factorise(withMottle(smooth, print, weights.coating, field), n)
  const width = columns.length / n
  const whitened = solveLowerColumns(factor, n, columns.slice(), width)
  const take = (from: number, count: number): Float64Array => {
    const taken = new Float64Array(n * count)
    for (let row = 0; row < n; row++) taken.set(whitened.subarray(row * width + from, row * width + from + count), row * count)
    return taken
  }
  return { bases: Array.from({ length: axes }, (_, a) => take(a * splineCount, splineCount)), lightnesses: take(width - 1, 1), determinant: logDeterminant(factor, n) }
}

function joined(parts: readonly Float64Array[]): Float64Array {
  const all = new Float64Array(parts.reduce((sum, part) => sum + part.length, 0))
  let at = 0
  for (const part of parts) {
    all.set(part, at)
    at += part.length
  }
  return all
}

/** The print-to-print spread at the tones where it shows most, over the patches' noise. */
function shiftOverNoise(first: Float64Array, deviation: number, spread: PrintSpread): PrintSpread {
  const { exposure, coating } = greatestShifts(first, spread)
  return { exposure: exposure / deviation, coating: coating / deviation }
}
