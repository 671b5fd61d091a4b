/** The language of figures and dates: the reader's own English, else British. */
export const figureLocale = (): string => (import.meta.client ? navigator.languages.find(language => language.startsWith('en')) : undefined) ?? 'en-GB'

/**
 * Reads a number as people type it: decimal comma or point, spaces between thousands, any minus sign.
 * Null where it is no number; two separators are refused rather than guessed at.
 */
export function parseDecimal(text: string): number | null {
  const plain = text.replace(/[\s\u00A0\u202F]/g, '').replace(/[−–]/, '-').replace(',', '.')
  return /^[+-]?(\d+\.?\d*|\.\d+)$/.test(plain) ? Number(plain) : null
}

/** Writes a number with at most so many digits after the separator, with a true minus sign. */
export function formatDecimal(value: number, maxDigits = 2): string {
  return new Intl.NumberFormat(figureLocale(), { maximumFractionDigits: maxDigits, useGrouping: false }).format(value).replace('-', '−')
}

/** The same with a sign before what is above zero, for settings around a neutral value. */
export const formatSigned = (value: number, maxDigits = 0): string => (value > 0 ? '+' : '') + formatDecimal(value, maxDigits)

/** A share as per cent: 0.018 → `1.8 %`. */
export const formatPercent = (share: number, maxDigits = 1): string => `${formatDecimal(share * 100, maxDigits)} %`

/** Today's hour, else the weekday within a week, else the date. */
export function formatWhen(instant: string, now = new Date()): string {
  const date = new Date(instant)
  const days = (now.getTime() - date.getTime()) / 86_400_000
  const shape: Intl.DateTimeFormatOptions = days < 1 && date.getDate() === now.getDate()
    ? { hour: '2-digit', minute: '2-digit' }
    : days < 6 ? { weekday: 'long' } : { day: 'numeric', month: 'long', year: date.getFullYear() === now.getFullYear() ? undefined : 'numeric' }
  return new Intl.DateTimeFormat(figureLocale(), shape).format(date)
}

/** The date, with the year where it is another. */
export function formatDay(instant: string, now = new Date()): string {
  const date = new Date(instant)
  return new Intl.DateTimeFormat(figureLocale(), { day: 'numeric', month: 'long', year: date.getFullYear() === now.getFullYear() ? undefined : 'numeric' }).format(date)
}

/** Bytes as a file manager shows them, in powers of ten. */
export function formatBytes(bytes: number): string {
  const [divisor, unit] = bytes < 1e6 ? [1e3, 'kB'] : bytes < 1e9 ? [1e6, 'MB'] : [1e9, 'GB']
  return `${formatDecimal(bytes / divisor, 1)} ${unit}`
}

/** Writes a number with exactly so many digits after the separator, for columns whose separators stand in line. */
export const formatFixed = (value: number, digits: number): string =>
  new Intl.NumberFormat(figureLocale(), { minimumFractionDigits: digits, maximumFractionDigits: digits, useGrouping: false }).format(value).replace(/^-(0[.,]?0*)$/, '$1').replace('-', '−')
