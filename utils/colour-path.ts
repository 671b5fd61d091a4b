import { srgbFromXyz } from '#shared/tone/colour-spaces'
import { xyzFromLab } from '#shared/tone/lab'
import type { LabPoint } from '#shared/tone/looks'
import { transform } from '#shared/tone/matrix'
import { linearToSrgb } from '#shared/tone/srgb'

/** A path's colours at so many even steps of its lightness, paper white first, as CSS takes them. */
export function pathColours(path: readonly LabPoint[], steps = 21): string[] {
  const [white, deepest] = [path[0]![0], path.at(-1)![0]]
  return Array.from({ length: steps }, (_, i) => cssOf(pointAt(path, white + (deepest - white) * i / (steps - 1))))
}

/** Straight between the path's points, which fall in lightness. */
function pointAt(path: readonly LabPoint[], lightness: number): LabPoint {
  const next = path.findIndex(point => point[0] <= lightness)
  if (next <= 0) return next === 0 ? path[0]! : path.at(-1)!
  const [above, below] = [path[next - 1]!, path[next]!]
  const share = (above[0] - lightness) / (above[0] - below[0])
  return [lightness, above[1] + share * (below[1] - above[1]), above[2] + share * (below[2] - above[2])]
}

function cssOf(lab: LabPoint): string {
  const [red, green, blue] = transform(srgbFromXyz, xyzFromLab(lab)).map(v => Math.round(255 * linearToSrgb(Math.min(1, Math.max(0, v)))))
  return `rgb(${red} ${green} ${blue})`
}
