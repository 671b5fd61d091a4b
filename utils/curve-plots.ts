import type { Plot, PlotAxis, PlotLine } from './plot-chart'
import type { ChartCurve, PlotPoint } from './curve-chart'
import { leftOver, responseBand, responseLine, toneBand, toneLine, valueAt } from './curve-chart'
import { densityFromLightness } from '#shared/tone/density'
import { formatDecimal, formatSigned } from './figures'
import { roundAxis } from './plot-chart'

const perCentAxis: PlotAxis = { min: 0, max: 100, step: 25, write: value => value === 100 ? '100 %' : String(value) }
const plain = (value: number) => formatDecimal(value, 1)

/** A line and the straight one between its ends, each named on its outer side where they lie farthest apart. */
function namedApart(line: PlotPoint[], name: string): PlotLine[] {
  const straight = [line[0]!, line[line.length - 1]!]
  const gap = (x: number) => valueAt(line, x) - valueAt(straight, x)
  const nameAt = Array.from({ length: 51 }, (_, i) => 25 + i).reduce((best, x) => Math.abs(gap(x)) > Math.abs(gap(best)) ? x : best)
  const isAbove = gap(nameAt) > 0
  return [
    { points: line, name, nameAt, nameSide: isAbove ? 'above' : 'below' },
    { points: straight, name: 'straight line', nameAt, nameSide: isAbove ? 'below' : 'above', dashed: true },
  ]
}

/** Print lightness against ink, with the patches that were read and the straight line that no bench follows. */
export function responsePlot(curve: ChartCurve, dots: PlotPoint[], name: string): Plot {
  const line = responseLine(curve)
  const ys = [...dots, ...line].map(p => p.y)
  return {
    x: perCentAxis, y: roundAxis(Math.min(...ys), Math.max(...ys), plain), dots, band: responseBand(curve),
    lines: namedApart(line, name),
    tell: p => `Ink ${plain(p.x)} %, print L* ${plain(p.y)}, D ${formatDecimal(densityFromLightness(p.y), 2)}`,
  }
}

/** What is left over, patch by patch, on a scale on which the band can be seen. */
export function leftOverPlot(curve: ChartCurve, dots: PlotPoint[]): Plot {
  const { points, band } = leftOver(curve, dots)
  const reach = Math.max(1, ...[...points, ...band.lower, ...band.upper].map(p => Math.abs(p.y)))
  const bound = reach > 4 ? Math.ceil(reach / 2) * 2 : Math.ceil(reach)
  return {
    x: perCentAxis, y: { min: -bound, max: bound, step: bound, write: value => formatSigned(value, 1) }, dots: points, band,
    lines: [{ points: [{ x: 0, y: 0 }, { x: 100, y: 0 }], name: '', nameAt: 0, nameSide: 'above' }],
    tell: p => `Ink ${plain(p.x)} %: band ${formatSigned(valueAt(band.lower, p.x), 1)} to ${formatSigned(valueAt(band.upper, p.x), 1)} L*`,
  }
}

/** The curve as the film takes it: ink against wanted tone. */
export function tonePlot(curve: ChartCurve, name: string): Plot {
  const line = toneLine(curve)
  return {
    x: perCentAxis, y: perCentAxis, band: toneBand(curve),
    lines: namedApart(line, name),
    tell: p => `Tone ${plain(p.x)} %, ink ${plain(p.y)} %`,
  }
}

/** Values as they are typed, joined in the order of ink: a slip of the finger stands out before it is kept. */
export function typedPlot(values: { level: number, value: number }[]): Plot {
  const points = values.map(v => ({ x: v.level * 100, y: v.value })).sort((a, b) => a.x - b.x)
  const ys = points.map(p => p.y)
  const spread = Math.max(...ys) - Math.min(...ys)
  const digits = spread < 5 ? 2 : 0
  return {
    x: perCentAxis, y: roundAxis(Math.min(...ys), Math.max(...ys), value => formatDecimal(value, digits)), dots: points,
    lines: [{ points, name: '', nameAt: 0, nameSide: 'above' }], tell: p => `Ink ${plain(p.x)} %: ${formatDecimal(p.y, 2)}`,
  }
}
