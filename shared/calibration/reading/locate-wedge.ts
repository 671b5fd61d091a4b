import type { WedgePage } from '../wedge/page'
import { centreOf } from '../wedge/page'
import type { Sampler } from './decode-marker'
import { findMarkers } from './find-markers'
import type { FindingPlane } from './finding-plane'
import { findingPlane, invertedPlane } from './finding-plane'
import { applyHomography, fitHomography } from './homography'
import type { PageMap, PlacedMarker } from './page-map'
import { mapThrough, placeMarkers } from './page-map'
import type { Point, ScanPicture } from './picture'
import { greatestCodeOf, sampleLeastCode } from './picture'
import type { PagePlacement } from './place-page'
import { leastMarkers, placePage } from './place-page'
import type { Quadrilateral } from './quadrilateral'

/** Longer sides of the plane that markers are looked for in, pixels, in this order. */
const planeSides = [1600, 3200, 800]
/** Least difference of light and dark at a marker's edge, share of the code range. */
const leastContrastShare = 1 / 16
/** With this share of the page's markers seen no other size of plane is tried. */
const satisfiedShare = 0.6

/** A wedge's page found in a picture. */
export interface LocatedWedge {
  page: WedgePage
  map: PageMap
  markers: PlacedMarker[]
  /** Centres of the corner markers, top-left, top-right, bottom-right, bottom-left of the print, pixels. */
  corners: [Point, Point, Point, Point]
  mirrored: boolean
  inverted: boolean
  /** Contrast-carrying value of the picture, light ink places high whatever the picture's polarity. */
  sample: Sampler
}

/**
 * Finds which of the given pages stands in a picture, and where; null when none shows at least three markers that fit it.
 * Light and dark may be exchanged.
 */
export function locateWedge(picture: ScanPicture, pages: readonly WedgePage[]): LocatedWedge | null {
  let best: LocatedWedge | null = null
  for (const side of planeSides) {
    const plane = findingPlane(picture, side)
    for (const inverted of [false, true]) {
      const found = locateInPlane(picture, inverted ? invertedPlane(plane) : plane, pages, inverted)
      if (found && found.markers.length > (best?.markers.length ?? 0)) best = found
      if (best && best.markers.length >= satisfiedShare * best.page.markers.length) return best
    }
  }
  return best
}

function locateInPlane(picture: ScanPicture, plane: FindingPlane, pages: readonly WedgePage[], inverted: boolean): LocatedWedge | null {
  const seen = findMarkers(plane, Math.max(...pages.map(page => page.markers.length)))
  const placed = pages.map(page => ({ page, placement: placePage(page, seen) }))
    .reduce((a, b) => (b.placement?.markers.length ?? 0) > (a.placement?.markers.length ?? 0) ? b : a)
  return placed.placement && refine(picture, placed.page, scaled(placed.placement, plane.factor), inverted)
}

/** The placement in pixels `factor` times as fine. */
const scaled = ({ toPicture, markers }: PagePlacement, factor: number): PagePlacement => ({
  toPicture: toPicture.map((value, i) => i < 6 ? value * factor : value),
  markers: markers.map(marker => ({ ...marker, corners: marker.corners.map(([x, y]): Point => [x * factor, y * factor]) as unknown as Quadrilateral })),
})

function refine(picture: ScanPicture, page: WedgePage, rough: PagePlacement, inverted: boolean): LocatedWedge | null {
  const greatest = greatestCodeOf(picture)
  const sample: Sampler = inverted ? (x, y) => greatest - sampleLeastCode(picture, x, y) : (x, y) => sampleLeastCode(picture, x, y)
  const markers = placeMarkers(page, rough, sample, greatest * leastContrastShare)
  return markers.length < leastMarkers ? null : located(page, mapThrough(page, markers), markers, inverted, sample)
}

function located(page: WedgePage, map: PageMap, markers: PlacedMarker[], inverted: boolean, sample: Sampler): LocatedWedge {
  const corners = [0, 1, 2, 3].map(id => markers.find(marker => marker.id === id)?.centre ?? map(centreOf(page.markers[id]!.place)))
  const [[ax, ay], [bx, by], [cx, cy]] = corners as [Point, Point, Point]
  const mirrored = (bx - ax) * (cy - by) - (by - ay) * (cx - bx) < 0
  return { page, map, markers, corners: corners as [Point, Point, Point, Point], mirrored, inverted, sample }
}

/**
 * A page laid by hand: `corners` are the centres of the four corner markers as the person put them. Markers near enough to where
 * that puts them are still found exactly; with fewer than three the corners count as they are.
 */
export function locateByCorners(picture: ScanPicture, page: WedgePage, corners: readonly [Point, Point, Point, Point]): LocatedWedge {
  const rough = fitHomography([0, 1, 2, 3].map(id => centreOf(page.markers[id]!.place)), corners)
  const placement = { toPicture: rough, markers: [] }
  const found = refine(picture, page, placement, false) ?? refine(picture, page, placement, true)
  if (found) return found
  const sample: Sampler = (x, y) => sampleLeastCode(picture, x, y)
  return located(page, point => applyHomography(rough, point), [], false, sample)
}
