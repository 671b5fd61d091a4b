import { centreOf } from '../wedge/page'
import type { RectMm, WedgePage } from '../wedge/page'
import type { SeenMarker } from './decode-marker'
import type { Homography } from './homography'
import { applyHomography, fitHomography } from './homography'
import type { Point } from './picture'
import { areaOf } from './quadrilateral'

/** Markers that must fit one perspective for a page to count as found. */
export const leastMarkers = 3

/** A page laid over a picture: mm of the page → pixels. */
export interface PagePlacement { toPicture: Homography, markers: SeenMarker[] }

/** A fitting marker's centre lies at most this far from where the page says, mm of a marker seen at that place. */
const toleranceMm = 3

/** Corners of a rectangle: top-left, top-right, bottom-right, bottom-left. */
export const cornersOf = ({ xMm, yMm, widthMm, heightMm }: RectMm): Point[] =>
  [[xMm, yMm], [xMm + widthMm, yMm], [xMm + widthMm, yMm + heightMm], [xMm, yMm + heightMm]]

/**
 * The perspective under which most of the seen markers fit the page, or null when fewer than three do. Every pair of markers
 * proposes one (random sample consensus with all samples: Fischler and Bolles, CACM 24(6):381–395, 1981); the best is fitted
 * again to all that agree.
 */
export function placePage(page: WedgePage, seen: readonly SeenMarker[]): PagePlacement | null {
  const known = seen.filter(marker => page.markers.some(({ id }) => id === marker.id))
  let best: PagePlacement | null = null
  for (let i = 0; i < known.length; i++) {
    for (let j = i + 1; j < known.length; j++) {
      if (known[i]!.id === known[j]!.id || known[i]!.mirrored !== known[j]!.mirrored) continue
      const toPicture = fitPage(page, [known[i]!, known[j]!])
      const markers = toPicture ? agreeing(page, toPicture, known) : []
      if (toPicture && markers.length > (best?.markers.length ?? leastMarkers - 1)) best = { toPicture, markers }
    }
  }
  return best && settle(page, best, known)
}

function settle(page: WedgePage, placement: PagePlacement, known: readonly SeenMarker[]): PagePlacement {
  let best = placement
  for (let pass = 0; pass < 3; pass++) {
    const toPicture = fitPage(page, best.markers)
    const markers = toPicture ? agreeing(page, toPicture, known) : []
    if (!toPicture || markers.length < best.markers.length) break
    best = { toPicture, markers }
  }
  return best
}

function fitPage(page: WedgePage, markers: readonly SeenMarker[]): Homography | null {
  const from = markers.flatMap(({ id }) => cornersOf(placeOf(page, id)))
  try {
    return fitHomography(from, markers.flatMap(({ corners }) => [...corners]))
  }
  catch {
    return null
  }
}

const placeOf = (page: WedgePage, id: number): RectMm => page.markers.find(marker => marker.id === id)!.place

/** The markers, one of each id, whose centres lie where the page says and which are as large as it says within a factor of two. */
function agreeing(page: WedgePage, toPicture: Homography, seen: readonly SeenMarker[]): SeenMarker[] {
  const best = new Map<number, { marker: SeenMarker, distance: number }>()
  for (const marker of seen) {
    const place = placeOf(page, marker.id)
    const expected = areaOf(cornersOf(place).map(corner => applyHomography(toPicture, corner)))
    const area = areaOf(marker.corners)
    if (area > 2 * expected || expected > 2 * area) continue
    const [x, y] = applyHomography(toPicture, centreOf(place))
    const [u, v] = meanOf(marker.corners)
    const distance = Math.hypot(x - u, y - v) / Math.sqrt(area) * place.widthMm
    if (distance < Math.min(toleranceMm, best.get(marker.id)?.distance ?? Infinity)) best.set(marker.id, { marker, distance })
  }
  return [...best.values()].map(({ marker }) => marker)
}

const meanOf = (points: readonly Point[]): Point => [
  points.reduce((sum, p) => sum + p[0], 0) / points.length, points.reduce((sum, p) => sum + p[1], 0) / points.length,
]
