import type { WedgePage } from '../wedge/page'
import type { PatchReading } from './correction'
import type { LocatedWedge } from './locate-wedge'
import { locateByCorners, locateWedge } from './locate-wedge'
import type { Point, ScanPicture } from './picture'
import { edgeWidthMm, judgeReading, qualityFromGeometry } from './quality'
import type { ReadingQuality } from './quality'
import type { WedgeReading } from './read-wedge'
import { readWedge } from './read-wedge'
import type { ReadingWarning } from './warnings'
import { readingWarning } from './warnings'

export interface ScanOptions {
  /** Ink levels of the patches in the wedge's order; without them no stray light is taken out and no wrong wedge noticed. */
  levels?: ArrayLike<number>
  /** Centres of the corner markers put by hand: top-left, top-right, bottom-right, bottom-left of the print, pixels. */
  corners?: readonly [Point, Point, Point, Point]
  /** What the file says of its device; else the geometry decides. Phone pictures are evened out from their references. */
  quality?: ReadingQuality
  /** L* of the bare paper under full ink where it is known: phone pictures are scaled to it. */
  paperLightness?: number
}

/** What a picture of a wedge print gave. `found` is false when the page was not there; then only the warnings say something. */
export type ScanReport = { found: false, warnings: ReadingWarning[] } | {
  found: true
  page: WedgePage
  quality: ReadingQuality
  /** Centres of the corner markers, top-left, top-right, bottom-right, bottom-left of the print, pixels; outside the picture where it is cropped. */
  corners: [Point, Point, Point, Point]
  mirrored: boolean
  inverted: boolean
  /** How far the print lies turned clockwise, −180 … 180; of a mirrored print, its lower edge's direction. */
  turnedDegrees: number
  markersSeen: number
  patches: (PatchReading | null)[]
  references: WedgeReading['references']
  diagnostics: WedgeReading['diagnostics']
  cells: WedgeReading['cells']
  pixelsPerMm: number
  /** Width of printed edges, 10 to 90 %, mm: softness of scan and contact together. */
  edgeWidthMm: number
  /** Share of stray light that was taken out. */
  glareShare: number
  warnings: ReadingWarning[]
}

/**
 * Reads a scan or a phone picture of a wedge print: which of the pages it shows and where, every patch, and what is wrong with it
 * in sentences. Never throws for a poor picture.
 * @throws ComputeError `invalid_input` when levels do not match the page or hand-put corners span nothing.
 */
export function readScan(picture: ScanPicture, pages: readonly WedgePage[], options: ScanOptions = {}): ScanReport {
  const located = options.corners ? locateByCorners(picture, pages[0]!, options.corners) : locateWedge(picture, pages)
  return located ? readLocated(picture, located, options) : { found: false, warnings: [readingWarning('not_found')] }
}

/**
 * The second half of `readScan`, for a page that was located already; `corners` of the options have done their work then.
 * @throws ComputeError `invalid_input` when levels do not match the page or hand-put corners span nothing.
 */
export function readLocated(picture: ScanPicture, located: LocatedWedge, options: Omit<ScanOptions, 'corners'> = {}): ScanReport & { found: true } {
  const quality = options.quality ?? qualityFromGeometry(located)
  const { levels, paperLightness } = options
  const reading = readWedge(picture, located, { levels, flatField: quality === 'phone', paperLightness: quality === 'phone' ? paperLightness : undefined })
  const { page, corners, mirrored, inverted, markers } = located
  const { patches, references, diagnostics, cells, pixelsPerMm } = reading
  return {
    found: true, page, quality, corners, mirrored, inverted, turnedDegrees: turnOf(located), markersSeen: markers.length,
    patches, references, diagnostics, cells, pixelsPerMm, edgeWidthMm: edgeWidthMm(located, reading), glareShare: reading.glare.total,
    warnings: judgeReading(picture, located, reading, quality, { levels }),
  }
}

/** Direction from the middle of the print's upper edge to that of its lower edge, less straight down. */
function turnOf({ corners: [a, b, c, d] }: LocatedWedge): number {
  const [x, y] = [c[0] + d[0] - a[0] - b[0], c[1] + d[1] - a[1] - b[1]]
  return Math.atan2(-x, y) * 180 / Math.PI
}
