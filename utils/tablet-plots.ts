import type { FilmDensities, Tablet } from '#shared/schemas/calibration'
import { nominalTablet } from '#shared/calibration/step-tablet'
import { densityFromLightness } from '#shared/tone/density'
import { formatDecimal, formatFixed } from './figures'
import type { FigureColumn, FigureRow } from './figure-rows'
import { measuredColumn, type MeasuredAs } from './exposure-strip'
import { perCentAxis, plain, roundAxis, type Plot } from './plot-chart'

const twoDigits = (value: number) => formatDecimal(value, 2)

/** A tablet whose own densities are not known: 21 steps, 0.15 apart. */
export const evenTablet = (): FigureRow<'density' | 'value'>[] => nominalTablet().map(density => ({ density: formatFixed(density, 2), value: '' }))

export const tabletColumns = (measuredAs: MeasuredAs): FigureColumn<'density' | 'value'>[] => [
  { key: 'density', name: 'Tablet, density', min: 0, max: 6, example: '0,15' },
  { key: 'value', ...measuredColumn(measuredAs), name: `Print, ${measuredColumn(measuredAs).name}` },
]

/** How deep the paper prints under each step of the tablet, with the step to expose for where there is one. */
export function tabletPlot(values: Tablet['values'], targetStep: number | null = null): Plot {
  const points = [...values].sort((a, b) => a.density - b.density).map(({ density, lightness }) => ({ x: density, y: densityFromLightness(Math.max(0.1, lightness)) }))
  const steps = [...values].sort((a, b) => a.density - b.density)
  const target = targetStep === null ? undefined : steps[targetStep - 1]
  return {
    x: { min: 0, max: Math.ceil(Math.max(1, ...points.map(p => p.x)) * 2) / 2, step: 0.5, write: value => formatDecimal(value, 1) }, y: roundAxis(0, Math.max(0.5, ...points.map(p => p.y)), twoDigits),
    lines: [{ points, name: '', nameAt: 0, nameSide: 'above' }], dots: [{ points, mark: 'circle', large: true }],
    places: target && [{ x: target.density, name: `step ${targetStep}` }],
    tell: p => `Under D ${twoDigits(p.x)} the print has D ${twoDigits(p.y)}`,
  }
}

/** Rows for the table beside it. */
export const tabletRows = (values: Tablet['values']) => [...values].sort((a, b) => a.density - b.density)
  .map(({ density, lightness }, i) => ({ step: i + 1, density, lightness, printDensity: densityFromLightness(Math.max(0.1, lightness)) }))

/** `1.65 in log exposure, 5.5 stops`. */
export const scaleText = (scale: number): string => `${formatFixed(scale, 2)} in log exposure, ${formatFixed(scale / Math.log10(2), 1)} stops`

/** What each ink level holds back of this lamp's UV, twice its standard deviation to either side. */
export function filmPlot(points: FilmDensities['points']): Plot {
  const at = (share: number) => points.map(p => ({ x: p.level * 100, y: Math.max(0, p.density + share * p.deviation) }))
  const line = at(0)
  const [lower, upper] = [at(-2), at(2)]
  return {
    x: perCentAxis, y: roundAxis(0, Math.max(...upper.map(p => p.y)), twoDigits), band: { lower, upper },
    lines: [{ points: line, name: 'this film', nameAt: 45, nameSide: 'above' }],
    tell: p => `Ink ${plain(p.x)} % holds back D ${twoDigits(p.y)}`,
  }
}
