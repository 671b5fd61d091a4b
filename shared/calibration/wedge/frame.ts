import { borderIds, markerSideMm } from './marker-codes'
import type { Island, PageLabel, PageMarker, RectMm, WedgePage } from './page'
import { rect } from './page'

/** Width of the bands around the field of patches, mm. */
export const bandsMm = { left: 24, top: 8, right: 8, bottom: 18 } as const
/** Bare film between a marker and the film's edge, mm. */
const edgeMm = 1
/** Between a marker and the even patches beside it, mm. */
const gapMm = 1.5
/** Neighbouring markers stand at most this far apart, mm. */
const markerSpacingMm = 52
/** Centre of the left border's first marker: below the code, mm. */
const leftMarkersFromMm = 50
const foilMm = 10
const padMm = 12
const islandMm = 4
const labelMm = 3
const writeInMm = 42

type Frame = Omit<WedgePage, 'kind' | 'columns' | 'rows' | 'patches' | 'pixelsPerInch'>

/**
 * Everything of a wedge's page but its patches, around a field of the given size (mm; at least 84 × 80):
 * markers in the corners and at most 52 mm apart along the borders, code, rulers, places for text and diagnostics.
 */
export function layOutFrame(fieldWidthMm: number, fieldHeightMm: number): Frame {
  const [widthMm, heightMm] = [bandsMm.left + fieldWidthMm + bandsMm.right, bandsMm.top + fieldHeightMm + bandsMm.bottom]
  const field = rect(bandsMm.left, bandsMm.top, fieldWidthMm, fieldHeightMm)
  const left = between(leftMarkersFromMm, heightMm - edgeMm - markerSideMm / 2, true)
  const { islands, foil } = leftColumn(left)
  const below = bandsMm.top + fieldHeightMm
  const xRulerMm = Math.floor((fieldWidthMm - writeInMm - 6) / 10) * 10
  const yRulerFromMm = 42
  const yRulerMm = Math.floor((heightMm - 8 - yRulerFromMm) / 10) * 10
  return {
    widthMm, heightMm, field, islands, grounds: [],
    markers: [...cornerMarkers(widthMm, heightMm), ...borderMarkers(widthMm, heightMm, left)],
    identity: { pad: rect(0, 9, 24, 28), symbol: rect(2, 13, 20), moduleCount: 21 },
    rulers: [
      { axis: 'x', place: rect(field.xMm, below + 0.5, xRulerMm, 3.5), lengthMm: xRulerMm },
      { axis: 'y', place: rect(20, yRulerFromMm, 3.5, yRulerMm), lengthMm: yRulerMm },
    ],
    writeIn: rect(field.xMm + fieldWidthMm - writeInMm, below + 1, writeInMm, 9),
    labels: labels(field, below, foil),
    diagnostics: {
      foil,
      bare: rect(widthMm + 3, heightMm / 2 - 3, 6),
      uncoated: rect(widthMm + 25, heightMm / 2 - 3, 6),
    },
  }
}

function cornerMarkers(widthMm: number, heightMm: number): PageMarker[] {
  const [right, bottom] = [widthMm - edgeMm - markerSideMm, heightMm - edgeMm - markerSideMm]
  return [
    beside(0, edgeMm, edgeMm, 1), beside(1, right, edgeMm, -1), beside(2, right, bottom, -1), beside(3, edgeMm, bottom, 1),
  ]
}

/** A marker with full ink, then clear film in the given direction along x. */
function beside(id: number, xMm: number, yMm: number, direction: 1 | -1): PageMarker {
  const stepMm = direction * (markerSideMm + gapMm)
  return { id, place: rect(xMm, yMm, markerSideMm), fullInk: rect(xMm + stepMm, yMm, markerSideMm), clear: rect(xMm + 2 * stepMm, yMm, markerSideMm) }
}

function borderMarkers(widthMm: number, heightMm: number, leftCentresMm: number[]): PageMarker[] {
  const half = markerSideMm / 2
  const [right, bottom] = [widthMm - edgeMm - markerSideMm, heightMm - edgeMm - markerSideMm]
  const along = between(edgeMm + half, widthMm - edgeMm - half)
  const down = between(edgeMm + half, heightMm - edgeMm - half)
  const step = markerSideMm + gapMm
  return [
    ...along.map((x, i) => flanked(borderIds.top + i, x - half, edgeMm, step, 0)),
    ...down.map((y, i) => flanked(borderIds.right + i, right, y - half, 0, step)),
    ...along.map((x, i) => flanked(borderIds.bottom + i, x - half, bottom, step, 0)),
    ...leftCentresMm.map((y, i): PageMarker => ({
      id: borderIds.left + i, place: rect(edgeMm, y - half, markerSideMm),
      fullInk: rect(edgeMm + step, y - half, markerSideMm), clear: rect(15, y - half, 4.5, markerSideMm),
    })),
  ]
}

/** A marker with full ink on one side and clear film on the other. */
const flanked = (id: number, xMm: number, yMm: number, dxMm: number, dyMm: number): PageMarker => ({
  id, place: rect(xMm, yMm, markerSideMm), fullInk: rect(xMm + dxMm, yMm + dyMm, markerSideMm), clear: rect(xMm - dxMm, yMm - dyMm, markerSideMm),
})

/** Even positions strictly between two corners' centres, closer than the spacing; `withFirst` keeps the first end too. */
function between(fromMm: number, toMm: number, withFirst = false): number[] {
  const parts = Math.ceil((toMm - fromMm) / markerSpacingMm)
  const inner = Array.from({ length: parts - 1 }, (_, i) => fromMm + (toMm - fromMm) * (i + 1) / parts)
  return withFirst ? [fromMm, ...inner] : inner
}

/** The foil's square and the islands, in the free parts of the left column between its markers. */
function leftColumn(markerCentresMm: number[]): { islands: Island[], foil: RectMm } {
  const foil = rect(4, markerCentresMm[0]! + markerSideMm / 2 + labelMm + gapMm, foilMm)
  const islands = markerCentresMm.slice(1).map(y => y - markerSideMm / 2 - gapMm - padMm)
    .filter(y => y >= foil.yMm + foilMm + gapMm)
    .concat(markerCentresMm.at(-1)! + markerSideMm / 2 + gapMm + (markerCentresMm.length === 1 ? foilMm + labelMm + gapMm : 0))
    .map((y): Island => ({ pad: rect(3, y, padMm), clear: rect(3 + (padMm - islandMm) / 2, y + (padMm - islandMm) / 2, islandMm) }))
  return { islands, foil }
}

const labels = (field: RectMm, belowMm: number, foil: RectMm): PageLabel[] => [
  { id: 'code', place: rect(1, 38, 22, labelMm), ink: 'full', text: null },
  { id: 'foil', place: rect(foil.xMm, foil.yMm - labelMm - 0.5, 14, labelMm), ink: 'full', text: 'foil' },
  { id: 'bench', place: rect(field.xMm, belowMm + 5.5, field.widthMm - writeInMm - 4, labelMm), ink: 'full', text: null },
  { id: 'print-number', place: rect(field.xMm + field.widthMm - writeInMm + 0.5, belowMm + 1.5, 20, 2.5), ink: 'clear', text: 'wedge print' },
]
