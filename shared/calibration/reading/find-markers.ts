import { labelComponents } from './components'
import type { SeenMarker } from './decode-marker'
import { decodeMarker } from './decode-marker'
import type { FindingPlane } from './finding-plane'
import { samplePlane } from './finding-plane'
import { lightAreas } from './light-areas'
import type { Quadrilateral } from './quadrilateral'
import { quadrilateralOf } from './quadrilateral'

/** Least side of a marker in the plane, pixels: two a module. */
const leastSidePx = 12
/** Greatest side as a share of the plane's longer side. */
const greatestShare = 0.2
/** Least difference of frame and surroundings, of 255. */
const leastContrast = 16
/** Tile sides of the local threshold that are tried, pixels of the plane. */
const tileSides = [8, 4, 16]

/**
 * Every marker that can be recognised in a plane, at any turn, mirrored or in perspective; the same marker may come
 * more than once, and a rare false one is possible: `placePage` sorts them by whether they fit one page.
 * Corners are in pixels of the plane. Stops at the first tile size that shows `enough` different markers.
 */
export function findMarkers(plane: FindingPlane, enough: number): SeenMarker[] {
  const all: SeenMarker[] = []
  for (const tile of tileSides) {
    all.push(...markersAtTile(plane, tile))
    if (new Set(all.map(marker => marker.id)).size >= enough) break
  }
  return all
}

function markersAtTile(plane: FindingPlane, tile: number): SeenMarker[] {
  const labelled = labelComponents(lightAreas(plane, tile), plane.width, plane.height)
  const greatest = greatestShare * Math.max(plane.width, plane.height)
  const sample = (x: number, y: number): number => samplePlane(plane, x, y)
  const seen: SeenMarker[] = []
  for (const component of labelled.components) {
    const [w, h] = [component.x1 - component.x0 + 1, component.y1 - component.y0 + 1]
    if (Math.min(w, h) < leastSidePx || Math.max(w, h) > greatest || Math.max(w, h) > 3 * Math.min(w, h)) continue
    const quadrilateral = quadrilateralOf(labelled, component, plane.width)
    const marker = quadrilateral && sidesAreAlike(quadrilateral) && decodeMarker(sample, quadrilateral, leastContrast)
    if (marker) seen.push(marker)
  }
  return seen
}

function sidesAreAlike(corners: Quadrilateral): boolean {
  const sides = corners.map(([x, y], i) => Math.hypot(corners[(i + 1) % 4]![0] - x, corners[(i + 1) % 4]![1] - y))
  return Math.max(...sides) < 2.5 * Math.min(...sides)
}
