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
  return { corners: refined as unknown as Quadrilateral, edgeWidthPx: medianOf(widths) }
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

/** A point counts as on the line within this many robust standard deviations, and in any case within the least distance, pixels. */
const [keptDeviations, keptPx] = [2.5, 0.05]
/** Median absolute deviation of a normal distribution to its standard deviation: 1 / Φ⁻¹(3/4). */
const madToDeviation = 1 / 0.674489750196082

/**
 * Least median of squares (Rousseeuw 1984) over all lines through two points, then total least squares of what lies on the best:
 * a hair or a scratch along nearly half of an edge doesn't draw the line to itself.
 */
function fitLine(points: Point[]): Line {
  let [best, least] = [principalLine(points), Infinity]
  for (let i = 0; i < points.length; i++) {
    for (let j = i + 1; j < points.length; j++) {
      const line = principalLine([points[i]!, points[j]!])
      const median = medianOf(distancesTo(line, points))
      if (median < least) [best, least] = [line, median]
    }
  }
  const limit = Math.max(keptDeviations * madToDeviation * least, keptPx)
  const distances = distancesTo(best, points)
  const kept = points.filter((_, i) => distances[i]! <= limit)
  return principalLine(kept)
}

const distancesTo = ([a, b, c]: Line, points: Point[]): number[] => points.map(([x, y]) => Math.abs(a * x + b * y - c))
const medianOf = (values: number[]): number => [...values].sort((a, b) => a - b)[values.length >> 1]!

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
