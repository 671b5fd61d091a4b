import { ComputeError } from '#shared/errors'
import type { PictureHeader } from './header'

const megapixels = (header: PictureHeader) => header.width * header.height / 1e6

/**
 * Most pixels that are decoded, in millions: pictures that must be held whole while decoding have the smaller budget.
 * Throws `picture_too_large`.
 */
export function requireWithinBudget(header: PictureHeader): void {
  const held = header.progressive || header.bitDepth === 16
  const budget = held ? 150 : 250
  if (megapixels(header) <= budget) return
  const kind = header.format === 'jpeg' ? (held ? 'a progressive JPEG' : 'a JPEG') : `a ${header.bitDepth}-bit ${header.progressive ? 'interlaced ' : ''}PNG`
  throw new ComputeError('picture_too_large', `This picture has ${header.width} × ${header.height} = ${Math.round(megapixels(header))} million pixels; ${kind} may have ${budget} million. Make it smaller and upload it again.`)
}
