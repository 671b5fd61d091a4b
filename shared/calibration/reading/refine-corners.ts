import { markerModules } from '../wedge/marker-codes'
import type { Sampler } from './decode-marker'
import { edgePosition } from './edge-position'
import type { Point } from './picture'
import type { Quadrilateral } from './quadrilateral'

/** Corners found again from a marker's four edges. */
export interface RefinedCorners {
  corners: Quadrilateral
  /** Median width of the edges from 10 to 90 % of their rise, pixels. */
  edgeWidthPx: number
}

/** Places along an edge where it is looked for, and the part of the edge (from its ends) they keep away from. */
const [placesAlong, endShare] = [12, 0.1]
/** Parallel profiles that are averaged at one place. */
const profilesAtPlace = 3
/** Steps of a profile. */
const profileSteps = 33

/**
 * Moves a marker's corners to the crossings of lines fitted to its outer edges, light inside and dark outside. Each edge is
 * looked for at 12 places, up to `reachModules` of a module to either side of where the given corners put it.
 * Null when an edge cannot be seen at half of its places. `leastRise` is in the sampler's unit.
 */
export function refineCorners(sample: Sampler, corners: Quadrilateral, reachModules: number, leastRise: number): RefinedCorners | null {
  const widths: number[] = []
  const lines = corners.map((corner, i) => {
    const edge = locateEdge(sample, corner, corners[(i + 1) % 4]!, centroid(corners), reachModules, leastRise)
    widths.push(...edge.widths)
    return edge.points.length < placesAlong / 2 ? null : fitLine(edge.points)
  })
  if (lines.some(line => line === null)) return null
  const refined = lines.map((line, i) => intersection(lines[(i + 3) % 4]!, line!))
  widths.sort((a, b) => a - b)
  return { corners: refined as unknown as Quadrilateral, edgeWidthPx: widths[widths.length >> 1]! }
}

const centroid = (corners: Quadrilateral): Point =>
  [corners.reduce((sum, c) => sum + c[0], 0) / 4, corners.reduce((sum, c) => sum + c[1], 0) / 4]

function locateEdge(sample: Sampler, a: Point, b: Point, inside: Point, reachModules: number, leastRise: number): { points: Point[], widths: number[] } {
  const side = Math.hypot(b[0] - a[0], b[1] - a[1])
  const along: Point = [(b[0] - a[0]) / side, (b[1] - a[1]) / side]
  let across: Point = [along[1], -along[0]]
  if ((inside[0] - a[0]) * across[0] + (inside[1] - a[1]) * across[1] > 0) across = [-across[0], -across[1]]
  const reach = reachModules * side / markerModules
  const step = 2 * reach / (profileSteps - 1)
  const spacing = side * (1 - 2 * endShare) / (placesAlong - 1)
  const points: Point[] = []
  const widths: number[] = []
  for (let i = 0; i < placesAlong; i++) {
    const s = side * endShare + i * spacing
    const centre: Point = [a[0] + along[0] * s, a[1] + along[1] * s]
    const edge = edgePosition(meanProfile(sample, centre, along, across, reach, spacing), leastRise, -1)
    if (!edge) continue
    const t = edge.at * step - reach
    points.push([centre[0] + across[0] * t, centre[1] + across[1] * t])
    widths.push(edge.width * step)
  }
  return { points, widths }
}

/** Values across an edge from `-reach` to `reach` along `across`, averaged over neighbouring profiles within `spacing`. */
function meanProfile(sample: Sampler, centre: Point, along: Point, across: Point, reach: number, spacing: number): Float64Array {
  const profile = new Float64Array(profileSteps)
  for (let k = 0; k < profilesAtPlace; k++) {
    const shift = ((k + 0.5) / profilesAtPlace - 0.5) * spacing
    for (let i = 0; i < profileSteps; i++) {
      const t = 2 * reach * i / (profileSteps - 1) - reach
      profile[i]! += sample(centre[0] + along[0] * shift + across[0] * t, centre[1] + along[1] * shift + across[1] * t) / profilesAtPlace
    }
  }
  return profile
}

/** A line n·p = c with |n| = 1. */
type Line = readonly [number, number, number]

/** Total least squares line, then again without points further than 2.5 times the median distance. */
function fitLine(points: Point[]): Line {
  const first = principalLine(points)
  const distances = points.map(([x, y]) => Math.abs(first[0] * x + first[1] * y - first[2]))
  const limit = 2.5 * Math.max([...distances].sort((a, b) => a - b)[points.length >> 1]!, 0.02)
  const kept = points.filter((_, i) => distances[i]! <= limit)
  return kept.length >= 4 ? principalLine(kept) : first
}

function principalLine(points: Point[]): Line {
  const n = points.length
  const mx = points.reduce((sum, p) => sum + p[0], 0) / n
  const my = points.reduce((sum, p) => sum + p[1], 0) / n
  let [xx, xy, yy] = [0, 0, 0]
  for (const [x, y] of points) {
    xx += (x - mx) ** 2
    xy += (x - mx) * (y - my)
    yy += (y - my) ** 2
  }
  const angle = Math.atan2(2 * xy, xx - yy) / 2
  const [nx, ny] = [-Math.sin(angle), Math.cos(angle)]
  return [nx, ny, nx * mx + ny * my]
}

function intersection([a, b, c]: Line, [d, e, f]: Line): Point {
  const determinant = a * e - b * d
  return [(c * e - b * f) / determinant, (a * f - c * d) / determinant]
}
