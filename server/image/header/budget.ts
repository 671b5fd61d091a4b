import { ComputeError } from '#shared/errors'
import { type PictureFormat, pictureFormatNames } from '#shared/schemas/picture-formats'
import type { PictureHeader } from './header'

/** Codecs of videos hold the picture several times over while they decode. */
const videoCoded: readonly PictureFormat[] = ['avif', 'heic']

/**
 * Most pixels that are decoded, in millions: pictures that must be held whole while decoding have the smaller budgets.
 * Throws `picture_too_large`.
 */
export function requireWithinBudget(header: PictureHeader): void {
  const held = header.progressive || header.bitDepth === 16 || header.format === 'webp'
  const budget = videoCoded.includes(header.format) ? 50 : held ? 150 : 250
  const claimed = header.width * header.height, coded = header.codedPixels ?? 0
  if (Math.max(claimed, coded) <= budget * 1e6) return
  const has = coded > claimed ? `${millions(coded)} million pixels of coded data` : `${header.width} × ${header.height} = ${millions(claimed)} million pixels`
  throw new ComputeError('picture_too_large', `This picture has ${has}; ${kindOf(header)} may have ${budget} million. Make it smaller and upload it again.`)
}

const millions = (pixels: number) => Math.round(pixels / 1e6)

function kindOf({ format, bitDepth, progressive }: PictureHeader): string {
  if (format === 'jpeg') return progressive ? 'a progressive JPEG' : 'a JPEG'
  const article = format === 'avif' ? 'an' : 'a'
  if (format === 'png' || format === 'tiff') return `${bitDepth === 8 ? 'an' : 'a'} ${bitDepth}-bit ${progressive ? 'interlaced ' : ''}${pictureFormatNames[format]}`
  return `${article} ${pictureFormatNames[format]} picture`
}
