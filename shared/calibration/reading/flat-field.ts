import { d50 } from '../../tone/colour-spaces'
import type { Light } from './glare'
import { solveLeastSquares } from './least-squares'
import type { Point } from './picture'

/** A reference patch: its place and measured luminance. */
export interface FieldReference { atMm: Point, luminance: number }

/** Makes a measured light what it would be in even light. */
export type FlatField = (atMm: Point, light: Light) => [number, number, number]

/** Coordinates are scaled by this, mm. */
const scaleMm = 100
/** A quadratic has six terms; with fewer references than this the field is a plane. */
const leastForQuadratic = 9
/** References needed for a plane. */
const leastReferences = 4
/** Residuals beyond this many robust deviations count less (Huber's weights). */
const huberLimit = 2

/**
 * Evens out the light of a phone picture: paper white must read alike everywhere (a factor, quadratic in place on its logarithm),
 * and so must the deepest tone then (white stray light: an offset, a plane). The means over the references stay what they were.
 * Unevenness of the coating's own black goes with it. Null with fewer than four references of either kind.
 */
export function flatFieldFrom(whites: readonly FieldReference[], blacks: readonly FieldReference[]): FlatField | null {
  if (whites.length < leastReferences || blacks.length < leastReferences) return null
  const gain = smoothField(whites.map(w => w.atMm), whites.map(w => Math.log(Math.max(1e-4, w.luminance))), whites.length >= leastForQuadratic)
  const flattened = blacks.map(b => b.luminance * Math.exp(-gain(b.atMm)))
  const veil = smoothField(blacks.map(b => b.atMm), flattened, false)
  return (atMm, light) => {
    const [factor, offset] = [Math.exp(-gain(atMm)), veil(atMm)]
    return light.map((value, k) => Math.max(0, value * factor - offset * d50[k]!)) as [number, number, number]
  }
}

/** A robust smooth field through the values, less its mean at the points. */
function smoothField(points: readonly Point[], values: readonly number[], quadratic: boolean): (at: Point) => number {
  const terms = ([x, y]: Point): number[] => {
    const [u, v] = [x / scaleMm, y / scaleMm]
    return quadratic ? [1, u, v, u * u, u * v, v * v] : [1, u, v]
  }
  const rows = points.map(terms)
  const at = (coefficients: ArrayLike<number>, row: number[]): number => row.reduce((sum, term, k) => sum + term * coefficients[k]!, 0)
  let weights = values.map(() => 1)
  let fit: ArrayLike<number> = []
  for (let pass = 0; pass < 5; pass++) {
    fit = solveLeastSquares(rows, values, weights, 1e-6)
    const misses = rows.map((row, i) => Math.abs(values[i]! - at(fit, row)))
    const limit = huberLimit * (1.4826 * [...misses].sort((a, b) => a - b)[misses.length >> 1]! + 1e-6)
    weights = misses.map(miss => Math.min(1, limit / Math.max(miss, 1e-12)))
  }
  const mean = rows.reduce((sum, row) => sum + at(fit, row), 0) / rows.length
  return point => at(fit, terms(point)) - mean
}
