import type { Aim } from '../schemas/curves'
import { aimCurve } from '../tone/aims'
import { valueAt } from '../tone/response'
import type { ErrorFigures } from './expected-error'
import { fitResponse } from './response-fit'
import { fitWedge } from './wedge-fit'
import type { WedgePatch } from './wedge-print'

/** A patch of a wedge printed through a curve: the tone it was to have, and the lightness that it has. Places as in a wedge print, where known. */
export interface CheckPatch extends Partial<Omit<WedgePatch, 'level' | 'lightness'>> { tone: number, lightness: number }

export interface CheckPoint { tone: number, aimed: number, printed: number, low: number, high: number }

export interface CurveCheck {
  /** |ΔL*| of the evened-out print against the aim, over all tones */
  greatest: number
  greatestAtTone: number
  mean: number
  /** what a print through a perfect curve would show, as greatest |ΔL*|, by the patches' noise alone */
  noiseAlone: ErrorFigures
  /** 33 tones, with the band that the patches' noise leaves */
  points: CheckPoint[]
}

const pointCount = 33
/** Patches with places from which the wedge's own fit takes unevenness out. */
const leastPlaced = 60

/**
 * How evenly a second wedge, printed through a curve, came out. The patches are fitted along tone as a wedge is along ink levels, so
 * single patches and uneven coating do not count as the curve's error; ΔL* is that fit less the aim between the curve's
 * own ends `black` and `white` (L*). `noiseAlone` comes from the fit's draws.
 * @throws ComputeError as `fitWedge` (60 patches with places or more) and `fitResponse` (fewer, or without places).
 */
export function checkCurve(patches: readonly CheckPatch[], { aim, black, white }: { aim: Aim, black: number, white: number }): CurveCheck {
  const aimed = aimCurve(aim, black, white)
  const fit = fitAlongTone(patches)
  const differences = Array.from(fit.response, (printed, i) => Math.abs(printed - aimed(i / (fit.response.length - 1))))
  const greatest = Math.max(...differences)
  return {
    greatest, greatestAtTone: differences.indexOf(greatest) / (differences.length - 1),
    mean: differences.reduce((sum, d) => sum + d, 0) / differences.length,
    noiseAlone: fit.expectedError.curve,
    points: Array.from({ length: pointCount }, (_, i) => {
      const tone = i / (pointCount - 1)
      return { tone, aimed: aimed(tone), printed: valueAt(fit.response, tone), low: valueAt(fit.low, tone), high: valueAt(fit.high, tone) }
    }),
  }
}

function fitAlongTone(patches: readonly CheckPatch[]) {
  const placed = patches.flatMap(({ tone, lightness, x, y, xMm, yMm }) =>
    x === undefined || y === undefined || xMm === undefined || yMm === undefined ? [] : [{ level: tone, lightness, x, y, xMm, yMm }])
  return placed.length >= leastPlaced ? fitWedge([placed]) : fitResponse(patches.map(({ tone, lightness }) => ({ level: tone, lightness })))
}
