import { lightnessFromDensity } from '#shared/tone/density'
import { formatDecimal, parseDecimal } from './figures'
import { formatExposure, readSeconds } from './exposure-time'
import type { FigureColumn, FigureRow } from './figure-rows'

export type ExposureUnit = 's' | 'dose'
export type MeasuredAs = 'lightness' | 'density'
export type StripKey = 'exposure' | 'first' | 'second'

/** Seconds as a time, light units as a figure. */
export const writeExposure = (value: number, unit: ExposureUnit): string => unit === 's' ? formatExposure(value) : `${formatDecimal(value, 1)} units`
export const readExposure = (text: string, unit: ExposureUnit): number | null => unit === 's' ? readSeconds(text) : parseDecimal(text)

/** A strip as the guide has it: ten steps, each half a stop more than the one before. Figures are what each step got in all. */
export const evenStrip = (firstExposure: number, unit: ExposureUnit, steps = 10, stopsPerStep = 0.5): FigureRow<StripKey>[] =>
  Array.from({ length: steps }, (_, i) => {
    const exposure = firstExposure * 2 ** (i * stopsPerStep)
    return { exposure: unit === 's' ? formatExposure(exposure) : formatDecimal(exposure, 1), first: '', second: '' }
  })

/** The columns of a strip that is typed in; the repeat may stay empty. */
export function stripColumns(unit: ExposureUnit, measuredAs: MeasuredAs): FigureColumn<StripKey>[] {
  const measured = measuredColumn(measuredAs)
  return [
    { key: 'exposure', name: unit === 's' ? 'Exposed in all' : 'Light units in all', read: text => readExposure(text, unit), min: 0.01, max: 1e6, example: unit === 's' ? '1 min 30 s' : '12,5', isWide: true },
    { key: 'first', ...measured, optional: true },
    { key: 'second', ...measured, name: 'Repeat', optional: true },
  ]
}

/** What an instrument shows of a print, as a column. */
export const measuredColumn = (measuredAs: MeasuredAs) => measuredAs === 'lightness'
  ? { name: 'L*', min: 0, max: 100, example: '42,5' }
  : { name: 'Density', min: 0, max: 6, example: '1,32' }

export const lightnessOf = (value: number, measuredAs: MeasuredAs): number => measuredAs === 'lightness' ? value : lightnessFromDensity(value)
