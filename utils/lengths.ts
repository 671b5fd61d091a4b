import { formatSize, type SizeMm } from '#shared/sheet/sizes'
import type { LengthUnit } from '~/composables/usePreferences'
import { figureLocale } from './figures'

/** A size in the preferred unit, as the screens write it. */
export const showSize = (size: SizeMm, unit: LengthUnit): string => formatSize(size, unit === 'inch' ? 'in' : 'mm', figureLocale())

/** Sizes offered at Start: three long sides, the other in the photo's shape, to whole millimetres or tenths of an inch. */
export function suggestedSizes(shape: number, unit: LengthUnit): SizeMm[] {
  const [longSides, step] = unit === 'inch' ? [[5, 7, 10].map(inches => inches * 25.4), 2.54] : [[130, 180, 240], 1]
  return longSides.map((long) => {
    const short = Math.max(5, Math.round(long / Math.max(shape, 1 / shape) / step) * step)
    return shape >= 1 ? { widthMm: long, heightMm: short } : { widthMm: short, heightMm: long }
  })
}
