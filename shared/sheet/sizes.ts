import { ComputeError } from '../errors'

/** Millimetres in an inch, exactly (ISO 31-1). */
export const millimetresPerInch = 25.4

export interface SizeMm { widthMm: number, heightMm: number }
/** A size with the name that people say; `unit` is the one it is defined in. */
export interface NamedSize extends SizeMm { name: string, group: 'iso-a' | 'iso-b' | 'photographic', unit: 'mm' | 'in' }

const iso = (group: 'iso-a' | 'iso-b', name: string, widthMm: number, heightMm: number): NamedSize => ({ name, group, unit: 'mm', widthMm, heightMm })
const inches = (width: number, height: number): NamedSize => ({
  name: `${width} × ${height} in`, group: 'photographic', unit: 'in', widthMm: width * millimetresPerInch, heightMm: height * millimetresPerInch,
})

/** Sizes offered in lists, upright. ISO 216:2007 for A and B; the usual inch sizes of photographic paper and film. */
export const namedSizes: readonly NamedSize[] = [
  iso('iso-a', 'A6', 105, 148), iso('iso-a', 'A5', 148, 210), iso('iso-a', 'A4', 210, 297), iso('iso-a', 'A3', 297, 420), iso('iso-a', 'A2', 420, 594),
  iso('iso-b', 'B6', 125, 176), iso('iso-b', 'B5', 176, 250), iso('iso-b', 'B4', 250, 353), iso('iso-b', 'B3', 353, 500),
  inches(4, 5), inches(5, 7), inches(8, 10), inches(8.5, 11), inches(10, 12), inches(11, 14), inches(12, 18), inches(13, 19), inches(16, 20), inches(17, 22),
]

const unitsMm: Record<string, number> = { mm: 1, cm: 10, m: 1000, in: millimetresPerInch, inch: millimetresPerInch, inches: millimetresPerInch, '"': millimetresPerInch, '″': millimetresPerInch }
const sizePattern = /^(\d+(?:[.,]\d+)?)\s*([a-z"″]*)\s*(?:[x×*]|by)\s*(\d+(?:[.,]\d+)?)\s*([a-z"″]*)$/
const lengthPattern = /^(\d+(?:[.,]\d+)?)\s*([a-z"″]*)$/

/**
 * A size as a person writes it: `18 x 24 cm`, `8x10in`, `180 × 240` (mm), `20,3 × 25,4 cm`, `A4`, `a4 landscape`. A unit after
 * the second number counts for both unless the first has its own; without one it is `fallbackUnit`.
 * @throws ComputeError `invalid_input` when it cannot be understood or a side is 0.
 */
export function parseSize(text: string, fallbackUnit: 'mm' | 'cm' | 'in' = 'mm'): SizeMm {
  const written = text.trim().toLowerCase().replace(/\s+/g, ' ')
  const [, name, landscape] = /^([ab]\d)( landscape)?$/.exec(written) ?? []
  const named = name && namedSizes.find(size => size.name.toLowerCase() === name)
  if (named) return landscape ? { widthMm: named.heightMm, heightMm: named.widthMm } : { widthMm: named.widthMm, heightMm: named.heightMm }
  const [, width, widthUnit, height, heightUnit] = sizePattern.exec(written) ?? []
  if (!width || !height) throw new ComputeError('invalid_input', 'Write a size like 18 x 24 cm or 8 x 10 in.')
  return { widthMm: inMm(width, widthUnit || heightUnit || fallbackUnit), heightMm: inMm(height, heightUnit || widthUnit || fallbackUnit) }
}

/**
 * A length in mm as a person writes it: `12`, `1,2 cm`, `0.5in`. Without a unit it is `fallbackUnit`.
 * @throws ComputeError `invalid_input` when it cannot be understood.
 */
export function parseLengthMm(text: string, fallbackUnit: 'mm' | 'cm' | 'in' = 'mm'): number {
  const [, value, unit] = lengthPattern.exec(text.trim().toLowerCase()) ?? []
  if (!value) throw new ComputeError('invalid_input', 'Write a length like 12 mm or 0.5 in.')
  return lengthMm(value, unit || fallbackUnit)
}

function inMm(value: string, unit: string): number {
  const length = lengthMm(value, unit)
  if (length > 0) return length
  throw new ComputeError('invalid_input', 'A side must be longer than 0.')
}

function lengthMm(value: string, unit: string): number {
  const mm = unitsMm[unit]
  if (mm === undefined) throw new ComputeError('invalid_input', `"${unit.slice(0, 20)}" is not a unit of length known here. Use mm, cm or in.`)
  return Number(value.replace(',', '.')) * mm
}

/** `203 × 254 mm` or `8 × 10 in`, in the locale's own figures; mm and cm to a tenth, inches to a hundredth. */
export function formatSize({ widthMm, heightMm }: SizeMm, unit: 'mm' | 'cm' | 'in' = 'mm', locale = 'en'): string {
  return `${formatNumber(widthMm / unitsMm[unit]!, unit, locale)} × ${formatLengthMm(heightMm, unit, locale)}`
}

/** `12.5 mm` or `0.49 in`, in the locale's own figures. */
export function formatLengthMm(lengthMm: number, unit: 'mm' | 'cm' | 'in' = 'mm', locale = 'en'): string {
  return `${formatNumber(lengthMm / unitsMm[unit]!, unit, locale)} ${unit}`
}

function formatNumber(value: number, unit: string, locale: string): string {
  return new Intl.NumberFormat(locale, { maximumFractionDigits: unit === 'in' ? 2 : 1 }).format(value)
}
