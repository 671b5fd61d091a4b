import { createHash } from 'node:crypto'
import type { FilmFormat } from '#shared/schemas/negatives'
import { largestCrop, straightenedFrame } from '#shared/sheet/crop'
import { filmPixels, pixelsFromMm } from '#shared/sheet/pixels'
import { formatSize } from '#shared/sheet/sizes'
import type { NegativeSettings } from '../db/schema'
import type { FilmOrder, WedgeFilmOrder } from '../image/protocol'
import { engineVersion } from '../image/version'
import { canonicalJson } from './creation'
import type { NegativeParts } from './negative-parts'

type Crop = FilmOrder['geometry']['crop']

const wholePicture: Crop = { x: 0, y: 0, width: 1, height: 1 }

/**
 * The part of the turned, straightened picture that is printed, in fractions of its bounding rectangle.
 * To fill the print (`fit: crop`) it has the print's shape: what was chosen is trimmed evenly where it is longer.
 */
export function resolveCrop(photo: { width: number, height: number }, settings: NegativeSettings): Crop {
  const chosen = settings.crop ?? undefined
  if (settings.fit === 'contain') return chosen ?? wholePicture
  const shape = { width: settings.size.widthMm, height: settings.size.heightMm }
  if (!chosen) return largestCrop(photo, settings, shape.width / shape.height)
  const frame = straightenedFrame(photo, settings)
  const [width, height] = [chosen.width * frame.width, chosen.height * frame.height]
  const scale = Math.min(width / shape.width, height / shape.height)
  const kept = { width: scale * shape.width / frame.width, height: scale * shape.height / frame.height }
  return { x: chosen.x + (chosen.width - kept.width) / 2, y: chosen.y + (chosen.height - kept.height) / 2, ...kept }
}

/** The film's pixels and size: the print and its margins, each rounded by itself. */
export function filmSize({ size, margin, pixelsPerInch }: Pick<NegativeSettings, 'size' | 'margin' | 'pixelsPerInch'>) {
  return {
    widthPixels: filmPixels(size.widthMm, margin.mm, pixelsPerInch),
    heightPixels: filmPixels(size.heightMm, margin.mm, pixelsPerInch),
    widthMm: size.widthMm + 2 * margin.mm,
    heightMm: size.heightMm + 2 * margin.mm,
  }
}

/** The resolved instruction for the image engine. */
export function filmOrder(parts: NegativeParts, format: FilmFormat): FilmOrder {
  const { negative, photo, bench, curve } = parts
  const { settings } = negative
  const { size, margin, pixelsPerInch } = settings
  const film = filmSize(settings)
  return {
    format,
    geometry: { quarterTurns: settings.quarterTurns, straightenDegrees: settings.straightenDegrees, crop: resolveCrop(photo, settings) },
    tone: { adjustments: settings.adjustments, aim: negative.aim, response: curve.response },
    picture: { widthPixels: pixelsFromMm(size.widthMm, pixelsPerInch), heightPixels: pixelsFromMm(size.heightMm, pixelsPerInch) },
    margin: { pixels: pixelsFromMm(margin.mm, pixelsPerInch), kind: margin.kind },
    pixelsPerInch,
    mirror: settings.mirror,
    inkColor: bench.ink.color.toLowerCase(),
    marks: { ...settings.marks, labelText: settings.marks.label ? labelText(parts) : '' },
    filmMm: { width: film.widthMm, height: film.heightMm },
  }
}

/** What stands in the margin, so that a film in a sleeve says what it is. */
function labelText({ negative, bench, curve }: NegativeParts): string {
  const { size, pixelsPerInch } = negative.settings
  return [negative.name, bench.name, `curve ${curve.version}${curve.calibrated ? '' : ' (uncalibrated)'}`, formatSize(size), `${pixelsPerInch} ppi`].join(' · ')
}

/** Names a film file by everything that decides its bytes: equal keys, equal bytes. */
export function renderKey(photoSha256: string, order: FilmOrder): string {
  const tone = { ...order.tone, response: hashOfTable(order.tone.response) }
  return sha256(canonicalJson({ original: photoSha256, order: { ...order, tone }, engine: engineVersion }))
}

/** The same for a wedge's film, which is made from its record alone. */
export function wedgeRenderKey(order: WedgeFilmOrder): string {
  const { throughCurve } = order
  return sha256(canonicalJson({ wedge: { ...order, throughCurve: throughCurve && hashOfTable(throughCurve) }, engine: engineVersion }))
}

const sha256 = (text: string): string => createHash('sha256').update(text).digest('hex')

/** A curve's table is large, and a list of negatives asks for it many times. */
const tableHashes = new WeakMap<number[], string>()

function hashOfTable(response: number[]): string {
  const hash = tableHashes.get(response) ?? sha256(canonicalJson(response))
  tableHashes.set(response, hash)
  return hash
}
