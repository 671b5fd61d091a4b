import { requireNumber } from '../tone/domain'
import { millimetresPerInch } from './sizes'

/**
 * Whole pixels of a length: round(mm / 25.4 · pixels per inch), halves up. Lengths 0 … 10 000 mm.
 * @throws ComputeError `invalid_input` outside the domain.
 */
export function pixelsFromMm(lengthMm: number, pixelsPerInch: number): number {
  requireNumber(pixelsPerInch, 'Pixels per inch', 1, 10_000)
  return Math.round(requireNumber(lengthMm, 'A length', 0, 10_000) / millimetresPerInch * pixelsPerInch)
}

/** The exact length of pixels, mm. */
export const mmFromPixels = (pixels: number, pixelsPerInch: number): number => pixels / pixelsPerInch * millimetresPerInch

/** A film's pixels along one side: round(size) + 2 · round(margin). */
export const filmPixels = (sizeMm: number, marginMm: number, pixelsPerInch: number): number =>
  pixelsFromMm(sizeMm, pixelsPerInch) + 2 * pixelsFromMm(marginMm, pixelsPerInch)
