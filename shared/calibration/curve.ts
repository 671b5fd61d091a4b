import type { Aim } from '../schemas/curves'
import { aimCurve } from '../tone/aims'
import { curveLevels } from '../tone/levels'
import type { Response } from '../tone/response'
import { positionOf, responsePoints } from '../tone/response'

export interface CurvePoint { tone: number, level: number, levelLow: number, levelHigh: number }

/**
 * The curve at 1025 equal steps of tone: the ink level, and the least and greatest that the response's band allows for the
 * same print lightness. `low` and `high` bound the response (1025 L* each, never falling); without them the band is the
 * curve itself. Straight lines between the points are the curve.
 * @throws ComputeError when the response is not one.
 */
export function curvePoints(response: Response, low: Response | null, high: Response | null, aim: Aim): CurvePoint[] {
  const wanted = aimCurve(aim, response[0]!, response[responsePoints - 1]!)
  return Array.from(curveLevels(response, aim), (level, i) => {
    const tone = i / (responsePoints - 1)
    const lightness = wanted(tone)
    return {
      tone, level,
      levelLow: high ? Math.min(level, positionOf(high, lightness)) : level,
      levelHigh: low ? Math.max(level, positionOf(low, lightness)) : level,
    }
  })
}
