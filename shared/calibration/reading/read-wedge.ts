import { ComputeError } from '../../errors'
import type { RectMm, WedgePage } from '../wedge/page'
import { innerRect } from '../wedge/page'
import { mapThroughCellEdges } from './cell-edges'
import { correctionFor } from './correction'
import type { PatchReading, ReadingOptions } from './correction'
import type { Glare } from './glare'
import { lightAround } from './light-plane'
import type { LocatedWedge } from './locate-wedge'
import type { PageMap } from './page-map'
import { innerShare, patchReader } from './patch-statistics'
import type { Point, ScanPicture } from './picture'
import { cornersOf } from './place-page'

/** Points along a patch's side for its first, rough reading. */
const roughPoints = 24

/** Everything a located wedge says: patches in the wedge's order, null where one does not lie in the picture. */
export interface WedgeReading {
  patches: (PatchReading | null)[]
  /** Beside each marker of the page, in its order. */
  references: { fullInk: PatchReading | null, clear: PatchReading | null }[]
  diagnostics: { foil: PatchReading | null, bare: PatchReading | null, uncoated: PatchReading | null }
  /** The inner part of each patch: four corners, pixels; for drawing over the picture. */
  cells: [Point, Point, Point, Point][]
  map: PageMap
  pixelsPerMm: number
  glare: Glare
  /** How much the full-ink references differ before the light is evened out, L*. */
  whiteUnevenness: number
}

/**
 * Reads every place of a located wedge: map corrected inside the field by the edges between cells, robust centres, stray light
 * taken out where the levels show it, light evened out when wanted.
 * @throws ComputeError `invalid_input` when levels do not match the page or corners set by hand span nothing.
 */
export function readWedge(picture: ScanPicture, located: LocatedWedge, options: ReadingOptions = {}): WedgeReading {
  const { page } = located
  if (options.levels && options.levels.length !== page.patches.length) throw new ComputeError('invalid_input', `This wedge has ${page.patches.length} patches, not ${options.levels.length}.`)
  const upright = located.inverted ? exchangedTones(picture) : picture
  const first = patchReader(upright, located.map, roughPoints)
  const map = mapThroughCellEdges(page, located.map, page.patches.map(patch => first(patch)?.lightness ?? NaN), located.sample)
  const read = patchReader(upright, map)
  const pixelsPerMm = scaleOf(page, map)
  const around = lightAround(upright, pixelsPerMm / 2)
  const correction = correctionFor({ page, map, read, around, pixelsPerMm }, options)
  const place = (at: RectMm): PatchReading | null => {
    const statistics = read(at)
    return statistics && correction.apply(statistics, at)
  }
  return {
    patches: page.patches.map(place),
    references: page.markers.map(({ fullInk, clear }) => ({ fullInk: place(fullInk), clear: place(clear) })),
    diagnostics: { foil: place(page.diagnostics.foil), bare: place(page.diagnostics.bare), uncoated: place(page.diagnostics.uncoated) },
    cells: page.patches.map(patch => cornersOf(innerRect(patch, innerShare)).map(map) as unknown as [Point, Point, Point, Point]),
    map, pixelsPerMm, glare: correction.glare, whiteUnevenness: correction.whiteUnevenness,
  }
}

/** The same codes meaning the opposite: for pictures with light and dark exchanged. */
const exchangedTones = (picture: ScanPicture): ScanPicture => ({ ...picture, colour: { ...picture.colour, linear: picture.colour.linear.slice().reverse() } })

/** Pixels along a mm at the page's middle, the lesser of both directions. */
function scaleOf(page: WedgePage, map: PageMap): number {
  const [x, y] = [page.widthMm / 2, page.heightMm / 2]
  const [a, b, c] = [map([x, y]), map([x + 1, y]), map([x, y + 1])]
  const scale = Math.min(Math.hypot(b[0] - a[0], b[1] - a[1]), Math.hypot(c[0] - a[0], c[1] - a[1]))
  if (!(scale > 0)) throw new ComputeError('invalid_input', 'The four corners do not span a page.')
  return scale
}
