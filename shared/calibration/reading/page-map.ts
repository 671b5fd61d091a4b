import { centreOf } from '../wedge/page'
import type { WedgePage } from '../wedge/page'
import type { Sampler, SeenMarker } from './decode-marker'
import { moduleAgreement } from './decode-marker'
import type { Homography } from './homography'
import { applyHomography, fitHomography } from './homography'
import type { Point } from './picture'
import type { PagePlacement } from './place-page'
import { cornersOf } from './place-page'
import type { Quadrilateral } from './quadrilateral'
import { refineCorners } from './refine-corners'
import { thinPlate } from './thin-plate'

/** Takes a point of the page (mm) to the picture (pixels). */
export type PageMap = (point: Point) => [number, number]

/** A marker with its corners found in full resolution. */
export interface PlacedMarker extends SeenMarker { edgeWidthPx: number, centre: Point }

/** How far an edge may lie from where it is expected, modules: twice from a rough place, as markers found first lead to others, then from a good one. */
const reaches = [0.9, 0.9, 0.7]
/** Share of its modules that a marker at a predicted place must show. */
const leastAgreement = 0.85
/** Smoothing of the paper's warp: noise of a centre's position against bending, in coordinates scaled to 1. */
const warpSmoothing = 1e-3
/** A marker may lie this far off the perspective of the others before it is taken for a wrong one, mm. */
const outlierMm = 4
/** Fewer centres say nothing about a warp beyond the perspective that they fix. */
const leastForWarp = 5

/**
 * Finds all of the page's markers at full resolution, starting from a rough placement: where a marker was seen, else where the
 * others put it. Markers that cannot be confirmed are left out.
 */
export function placeMarkers(page: WedgePage, { toPicture, markers }: PagePlacement, sample: Sampler, leastContrast: number): PlacedMarker[] {
  let map: PageMap = point => applyHomography(toPicture, point)
  let placed: PlacedMarker[] = []
  for (const reach of reaches) {
    const known = placed.length > 0 ? placed : markers
    placed = page.markers.map(({ id, place }) => {
      const expected = known.find(marker => marker.id === id)?.corners ?? cornersOf(place).map(map) as unknown as Quadrilateral
      return confirm(id, expected, sample, reach, leastContrast)
    }).filter(marker => marker !== null)
    placed = withoutOutliers(page, placed)
    if (placed.length < 2) return placed
    map = mapThrough(page, placed)
  }
  return placed
}

function confirm(id: number, expected: Quadrilateral, sample: Sampler, reach: number, leastContrast: number): PlacedMarker | null {
  const refined = refineCorners(sample, expected, reach, leastContrast)
  if (!refined || moduleAgreement(sample, id, refined.corners, leastContrast) < leastAgreement) return null
  const [[ax, ay], [bx, by], [cx, cy]] = expected
  const mirrored = (bx - ax) * (cy - by) - (by - ay) * (cx - bx) < 0
  const centre = applyHomography(fitHomography([[0, 0], [1, 0], [1, 1], [0, 1]], refined.corners), [0.5, 0.5])
  return { id, mirrored, ...refined, centre }
}

/** Drops markers further than 4 mm from where the perspective of the others has them, the worst first. */
function withoutOutliers(page: WedgePage, placed: PlacedMarker[]): PlacedMarker[] {
  const kept = [...placed]
  while (kept.length > 4) {
    const fit = perspective(page, kept)
    const misses = kept.map(marker => missMm(page, marker, fit))
    const worst = misses.indexOf(Math.max(...misses))
    if (misses[worst]! < outlierMm) break
    kept.splice(worst, 1)
  }
  return kept
}

function missMm(page: WedgePage, { id, centre, corners }: PlacedMarker, fit: Homography): number {
  const place = page.markers.find(marker => marker.id === id)!.place
  const [x, y] = applyHomography(fit, centreOf(place))
  const sidePx = Math.hypot(corners[2][0] - corners[0][0], corners[2][1] - corners[0][1]) / Math.SQRT2
  return Math.hypot(x - centre[0], y - centre[1]) / sidePx * place.widthMm
}

/** The perspective through all corners of the markers: what lies even on the page has grown or shrunk alike on all sides. */
export const perspective = (page: WedgePage, placed: readonly PlacedMarker[]): Homography =>
  fitHomography(placed.flatMap(({ id }) => cornersOf(page.markers.find(marker => marker.id === id)!.place)), placed.flatMap(({ corners }) => [...corners]))

/** Perspective, then the paper's own warp as a thin plate through the markers' centres. */
export function mapThrough(page: WedgePage, placed: readonly PlacedMarker[]): PageMap {
  const h = perspective(page, placed)
  if (placed.length < leastForWarp) return point => applyHomography(h, point)
  const centres = placed.map(({ id }) => centreOf(page.markers.find(marker => marker.id === id)!.place))
  const shifts = placed.map(({ centre }, i): Point => {
    const [x, y] = applyHomography(h, centres[i]!)
    return [centre[0] - x, centre[1] - y]
  })
  const warp = thinPlate(centres, shifts, warpSmoothing)
  return (point) => {
    const [x, y] = applyHomography(h, point)
    const [dx, dy] = warp(point)
    return [x + dx, y + dy]
  }
}
