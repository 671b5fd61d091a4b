import { densityFromLightness } from '#shared/tone/density'
import { writeExposure, type ExposureUnit } from './exposure-strip'
import { formatDecimal } from './figures'
import { plain, roundAxis, type Plot } from './plot-chart'

export interface StripPoint { exposure: number, lightness: number, isRepeat: boolean }
export interface StripView {
  unit: ExposureUnit
  points: StripPoint[]
  /** the fitted curve */
  line: { exposure: number, lightness: number }[]
  base: { value: number, low: number | null, high: number | null } | null
}

/** A strip's tones against its exposures, a stop to each tick, with the base exposure and how far it is known. */
export function stripPlot({ unit, points, line, base }: StripView): Plot {
  const stops = (exposure: number) => Math.log2(exposure)
  const all = [...points.map(p => p.exposure), ...line.map(p => p.exposure), ...base ? [base.value] : []].map(stops)
  const least = Math.min(...all)
  const start = Math.min(...points.map(p => stops(p.exposure)))
  const [below, above] = [Math.ceil(start - least), Math.ceil(Math.max(...all) - start)]
  const ys = [...points, ...line].map(p => p.lightness)
  const dots = (isRepeat: boolean) => points.filter(p => p.isRepeat === isRepeat).map(p => ({ x: stops(p.exposure), y: p.lightness }))
  const byFit = [...line].sort((a, b) => a.exposure - b.exposure).map(p => ({ x: stops(p.exposure), y: p.lightness }))
  return {
    x: { min: start - below, max: start + Math.max(1, above), step: 1, write: value => shortExposure(2 ** value, unit) }, y: roundAxis(Math.min(...ys), Math.max(...ys), plain),
    dots: [{ points: dots(false), mark: 'circle' as const, large: true }, { points: dots(true), mark: 'triangle' as const, large: true }].filter(d => d.points.length),
    lines: [{ points: byFit.length ? byFit : dots(false), name: '', nameAt: 0, nameSide: 'above' }],
    places: base ? [{ x: stops(base.value), name: writeExposure(base.value, unit), low: base.low === null ? null : stops(base.low), high: base.high === null ? null : stops(base.high) }] : [],
    tell: p => `${writeExposure(2 ** p.x, unit)}: L* ${plain(p.y)}, D ${formatDecimal(densityFromLightness(Math.max(0.1, p.y)), 2)}`,
  }
}

/** `4:14` or `42 s`: short enough for a tick. */
export function shortExposure(value: number, unit: ExposureUnit): string {
  if (unit === 'dose') return formatDecimal(value, value < 10 ? 1 : 0)
  if (value < 59.5) return `${formatDecimal(value, value < 10 ? 1 : 0)} s`
  const seconds = Math.round(value)
  const minutes = Math.floor(seconds / 60)
  return minutes < 60 ? `${minutes}:${String(seconds % 60).padStart(2, '0')}` : `${Math.floor(minutes / 60)} h ${minutes % 60}`
}
