import { createHash } from 'node:crypto'
import { formatIdentity } from '#shared/calibration/wedge/identity-code'
import { filmFormats, type FilmFormat } from '#shared/schemas/negatives'
import type { WedgeFilmOrder } from '../image/protocol'
import { engineVersion } from '../image/version'
import { storageKeys } from '../storage'
import { canonicalJson } from './creation'
import { wedgeRenderKey } from './film-order'
import { imageChild } from './image-child'
import { cachedPicture, type CachedPicture } from './photo-pictures'
import type { FilmRequest } from './renders'
import { throughCurveOf } from './wedge-charts'
import type { WedgeParts } from './wedge-parts'

/** The resolved instruction for the image engine. */
export function wedgeFilmOrder(parts: WedgeParts, format: FilmFormat): WedgeFilmOrder {
  const { wedge, bench } = parts
  return {
    format, plan: wedge.plan, code: wedge.code, page: { widthMm: wedge.widthMm, heightMm: wedge.heightMm }, throughCurve: throughCurveOf(parts),
    pixelsPerInch: wedge.pixelsPerInch, mirror: bench.mirror, inkColor: wedge.inkColor.toLowerCase(), lines: linesOf(parts), title: titleOf(parts),
  }
}

/** What the film says of itself: bench, date, path, and what is particular about it. */
function linesOf({ wedge, bench, curve }: WedgeParts): string[] {
  const { fileKind, bitDepth, mediaType, quality, sentBy } = wedge.path
  const path = [fileKind?.toUpperCase(), bitDepth && `${bitDepth} bit`, `${wedge.pixelsPerInch} ppi`, mediaType, quality, sentBy].filter(Boolean).join(', ')
  const mixes = wedge.plan.kind === 'ink-trial' ? [`mixes ${wedge.plan.mixes.join(' ')}`] : []
  return [bench.name, wedge.createdAt.toISOString().slice(0, 10), path, ...curve ? [`through curve ${curve.version}`] : [], ...mixes]
}

/** What the worker is asked for when somebody wants this wedge's film. */
export function wedgeFilmRequest(parts: WedgeParts, format: FilmFormat, requestId?: string): FilmRequest & { order: WedgeFilmOrder } {
  const order = wedgeFilmOrder(parts, format)
  return { studioId: parts.wedge.studioId, of: { wedgeId: parts.wedge.id }, key: wedgeRenderKey(order), order, requestId }
}

/** Names of the film files that there can be. */
export const wedgeFilmKeys = (parts: WedgeParts): string[] => filmFormats.map(format => wedgeFilmRequest(parts, format).key)

/** The wedge's sheet as its print may read. */
export function wedgePreviewOf(parts: WedgeParts, width: number): Promise<CachedPicture> {
  const { wedge: { studioId, id }, bench } = parts
  const order = wedgeFilmOrder(parts, 'png')
  const asked = createHash('sha256').update(canonicalJson({ engine: engineVersion, order, width, palette: bench.process })).digest('hex')
  return cachedPicture(storageKeys.picture(studioId, id, asked), target => imageChild().call('wedgePreview', { target, order, width, palette: bench.process }))
}

const titleOf = ({ wedge }: Pick<WedgeParts, 'wedge'>): string => `${wedgeNames[wedge.kind]} ${formatIdentity(wedge.code)}`

const wedgeNames = {
  'scattered': 'Wedge', 'numbered': 'Numbered wedge', 'ink-trial': 'Ink trial', 'ink-load': 'Ink load check', 'exposure-strip': 'Exposure strip', 'step-tablet': 'Step tablet',
} as const
