import { ComputeError } from '#shared/errors'
import type { PictureHeader } from './header'

const megapixels = (header: PictureHeader) => header.width * header.height / 1e6

/**
 * Most pixels that are decoded, in millions: pictures that must be held whole while decoding have the smaller budget.
 * Throws `picture_too_large`.
 */
export function requireWithinBudget(header: PictureHeader): void {
  const held = header.progressive || header.bitDepth === 16
  const budget = header.format === 'heic' ? 60 : held ? 150 : 250
  if (megapixels(header) <= budget) return
  const kind = kindOf(header, held)
  throw new ComputeError('picture_too_large', `This picture has ${header.width} × ${header.height} = ${Math.round(megapixels(header))} million pixels; ${kind} may have ${budget} million. Make it smaller and upload it again.`)
}

function kindOf({ format, bitDepth, progressive }: PictureHeader, held: boolean): string {
  if (format === 'jpeg') return held ? 'a progressive JPEG' : 'a JPEG'
  if (format === 'heic') return 'a HEIC picture'
  return `a ${bitDepth}-bit ${progressive ? 'interlaced ' : ''}${format.toUpperCase()}`
}
