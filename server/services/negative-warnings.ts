import type { Warning } from '#shared/schemas/curves'
import type { FilmFormat } from '#shared/schemas/negatives'
import { straightenedFrame } from '#shared/sheet/crop'
import { millimetresPerInch } from '#shared/sheet/sizes'
import { resolveCrop } from './film-order'
import type { NegativeParts } from './negative-parts'

/** Below this a print looks soft from reading distance: common practice, no source. */
const fewPixelsPerInch = 180
/** Resolutions that inkjets take without rescaling, where the bench's own inkjet says nothing of it. */
const usualPixelsPerInch = [300, 360, 600, 720]
/** The least margin in which ruler and label find room. */
export const marksLeastMarginMm = 6

/** What a person should know before spending film and paper on this negative, most important first. */
export function negativeWarnings(parts: NegativeParts, formats: FilmFormat[] = []): Warning[] {
  return [uncalibrated(parts), otherMirror(parts), ...otherPath(parts, formats), fewPixels(parts), noRoomForMarks(parts)].filter(w => w !== undefined)
}

function uncalibrated({ curve }: NegativeParts): Warning | undefined {
  if (curve.calibrated) return undefined
  return { code: 'uncalibrated', message: ['This curve is a starting point that rests on assumptions, not on a reading of your paper. Make a test strip first.', ...curve.assumptions].join(' ') }
}

function otherMirror({ negative, bench }: NegativeParts): Warning | undefined {
  if (negative.settings.mirror === bench.mirror) return undefined
  return { code: 'mirror_differs', message: bench.mirror ? 'This film is not mirrored: with its printed side on the paper the print will read the wrong way round.' : 'This film is mirrored, and the bench’s process turns the picture over by itself: the print will read the wrong way round.' }
}

/** The curve holds for the way on which the wedge reached the film. */
function otherPath({ negative, bench, curve, inkjet }: NegativeParts, formats: FilmFormat[]): Warning[] {
  const { pixelsPerInch } = negative.settings
  const { path } = bench
  const warnings: Warning[] = []
  if (path.pixelsPerInch !== undefined && path.pixelsPerInch !== pixelsPerInch) {
    warnings.push({ code: 'other_path', message: `This film has ${pixelsPerInch} pixels per inch; ${bench.name} ${curve.calibrated ? 'was calibrated' : 'is set up'} with ${path.pixelsPerInch}. Its tones may come out otherwise.` })
  }
  for (const format of formats) {
    if (path.fileKind !== undefined && path.fileKind !== format) {
      warnings.push({ code: 'other_file_kind', message: `This file is ${format.toUpperCase()}; ${bench.name} ${curve.calibrated ? 'was calibrated' : 'is set up'} with ${path.fileKind.toUpperCase()}. Print a small patch of each before you trust it.` })
    }
  }
  const native = inkjet?.facts.nativePixelsPerInch ?? usualPixelsPerInch
  if (path.pixelsPerInch === undefined && !native.includes(pixelsPerInch)) {
    const takes = inkjet?.facts.nativePixelsPerInch ? `${inkjet.name} takes` : 'Inkjets take'
    warnings.push({ code: 'resolution_not_native', message: `${takes} ${native.join(', ')} pixels per inch without rescaling; ${pixelsPerInch} may be rescaled on the way.` })
  }
  return warnings
}

/** How many pixels of the photo there are for an inch of the print, whatever the film's own resolution. */
export function photoPixelsPerInch({ negative, photo }: Pick<NegativeParts, 'negative' | 'photo'>): number {
  const { settings } = negative
  const crop = resolveCrop(photo, settings)
  const frame = straightenedFrame(photo, settings)
  const [across, down] = [crop.width * frame.width / settings.size.widthMm, crop.height * frame.height / settings.size.heightMm]
  return millimetresPerInch * Math.max(across, down)
}

function fewPixels(parts: NegativeParts): Warning | undefined {
  const pixelsPerInch = Math.floor(photoPixelsPerInch(parts))
  if (pixelsPerInch >= fewPixelsPerInch) return undefined
  return { code: 'few_pixels', message: `At this size the photo has only ${pixelsPerInch} pixels for an inch, so the print will look soft from near by. A smaller print, or less cropping, helps.` }
}

function noRoomForMarks({ negative }: NegativeParts): Warning | undefined {
  const { marks, margin } = negative.settings
  if ((!marks.ruler && !marks.label) || margin.mm >= marksLeastMarginMm) return undefined
  return { code: 'no_room_for_marks', message: `Ruler and label need a margin of at least ${marksLeastMarginMm} mm; at ${margin.mm} mm they are left out.` }
}
