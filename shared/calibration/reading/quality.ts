import type { PatchReading, ReadingOptions } from './correction'
import { looksStretched } from './levelled'
import type { LocatedWedge } from './locate-wedge'
import type { ScanPicture } from './picture'
import { areaOf } from './quadrilateral'
import type { WedgeReading } from './read-wedge'
import type { ReadingWarning } from './warnings'
import { readingWarning } from './warnings'

/** Below this the inner part of a 7 mm cell has fewer than 30 pixels a side (about 140 pixels per inch). */
const leastPixelsPerMm = 5.5
/** Wider edges than this (10 to 90 %) come near the part of a cell that is read, mm; 150 pixels per inch and good contact give half of it. */
const greatestEdgeMm = 0.6
/** Share of a reference's pixels at the end of the scale. */
const greatestClippedShare = 0.2
/** Least difference between white and black references, L*. */
const leastRangeLightness = 25
/** Difference among the white references that is called uneven light, L*. */
const greatestUnevenness = 4
/** A patch is spotted with this share of its pixels left out; a print is with this share of its patches. */
const [spottedPixels, spottedPatches] = [0.1, 0.05]
const fewMarkersShare = 0.7
/** Correlation of lightness and level below which the levels are not this print's. */
const leastCorrelation = 0.5
/** Ratio of the largest to the smallest marker that no flatbed makes. */
const perspectiveRatio = 1.05

export type ReadingQuality = 'scan' | 'phone'

/** Width of the markers' edges from 10 to 90 % of their rise, mm; NaN where no marker was seen. */
export function edgeWidthMm({ markers }: LocatedWedge, { pixelsPerMm }: WedgeReading): number {
  const widths = markers.map(marker => marker.edgeWidthPx).sort((a, b) => a - b)
  return (widths[widths.length >> 1] ?? NaN) / pixelsPerMm
}

/** What the geometry says of the device: markers of unequal size in one picture mean a camera. */
export function qualityFromGeometry({ markers }: LocatedWedge): ReadingQuality {
  const sides = markers.map(marker => Math.sqrt(areaOf(marker.corners)))
  return sides.length > 0 && Math.max(...sides) > perspectiveRatio * Math.min(...sides) ? 'phone' : 'scan'
}

/** Everything there is to say about a picture that was read. */
export function judgeReading(picture: ScanPicture, located: LocatedWedge, reading: WedgeReading, quality: ReadingQuality, options: ReadingOptions): ReadingWarning[] {
  const missing = reading.patches.filter(patch => patch === null).length
  const said: [boolean, () => ReadingWarning][] = [
    [missing > 0, () => readingWarning('cropped', `${missing} of ${reading.patches.length} patches are missing.`)],
    [reading.pixelsPerMm < leastPixelsPerMm, () => readingWarning('too_small', `A millimetre has ${reading.pixelsPerMm.toFixed(1)} pixels.`)],
    [edgeWidthMm(located, reading) > greatestEdgeMm, () => readingWarning('blurred')],
    [located.mirrored && located.inverted, () => readingWarning('film_itself')],
    [located.mirrored && !located.inverted, () => readingWarning('mirrored')],
    [located.inverted && !located.mirrored, () => readingWarning('inverted')],
    [located.markers.length < fewMarkersShare * located.page.markers.length, () => readingWarning('few_markers')],
    [quality === 'phone', () => readingWarning('phone')],
    [looksStretched(picture), () => readingWarning('auto_levelled')],
    ...aboutReferences(reading),
    ...aboutPatches(reading, options),
  ]
  return said.filter(([holds]) => holds).map(([, warning]) => warning())
}

function aboutReferences({ references, whiteUnevenness }: WedgeReading): [boolean, () => ReadingWarning][] {
  const whites = references.flatMap(({ fullInk }) => fullInk ?? [])
  const blacks = references.flatMap(({ clear }) => clear ?? [])
  const both = whites.length > 0 && blacks.length > 0
  return [
    [both && mean(whites, white => white.clippedLightShare) > greatestClippedShare, () => readingWarning('clipped_light')],
    [both && mean(blacks, black => black.clippedDarkShare) > greatestClippedShare, () => readingWarning('clipped_dark')],
    [both && mean(whites, white => white.lightness) - mean(blacks, black => black.lightness) < leastRangeLightness, () => readingWarning('weak_contrast')],
    [whiteUnevenness > greatestUnevenness, () => readingWarning('uneven_light')],
  ]
}

function aboutPatches({ patches }: WedgeReading, { levels }: ReadingOptions): [boolean, () => ReadingWarning][] {
  const read = patches.flatMap((patch, i) => patch ? [{ patch, level: levels?.[i] ?? NaN }] : [])
  const spotted = read.filter(({ patch }) => patch.rejectedShare > spottedPixels).length
  return [
    [spotted > spottedPatches * read.length, () => readingWarning('spots')],
    [levels !== undefined && read.length > 2 && correlation(read.map(r => r.level), read.map(r => r.patch.lightness)) < leastCorrelation, () => readingWarning('other_wedge')],
  ]
}

const mean = (readings: PatchReading[], of: (reading: PatchReading) => number): number => readings.reduce((sum, r) => sum + of(r), 0) / readings.length

/** Pearson's correlation; 0 where either side does not vary. */
function correlation(a: number[], b: number[]): number {
  const n = a.length
  const [ma, mb] = [a.reduce((s, v) => s + v, 0) / n, b.reduce((s, v) => s + v, 0) / n]
  let [ab, aa, bb] = [0, 0, 0]
  for (let i = 0; i < n; i++) {
    ab += (a[i]! - ma) * (b[i]! - mb)
    aa += (a[i]! - ma) ** 2
    bb += (b[i]! - mb) ** 2
  }
  return aa > 0 && bb > 0 ? ab / Math.sqrt(aa * bb) : 0
}
