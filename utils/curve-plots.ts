import type { Plot, PlotDots, PlotLine } from './plot-chart'
import type { Band, ChartCurve, PlotPoint } from './curve-chart'
import { aboutLine, leftOver, responseBand, responseLine, toneBand, toneLine, valueAt, wideBand } from './curve-chart'
import { densityFromLightness } from '#shared/tone/density'
import { formatDecimal, formatSigned } from './figures'
import { perCentAxis, plain, roundAxis, roundAxisAboutZero } from './plot-chart'

/** What may be laid into a curve's plots besides the curve: measured patches by wedge print, other versions, the band for all tones at once. */
export interface CurveCompany { dots: PlotDots[], others: { name: string, curve: ChartCurve }[], showsWideBand: boolean }
export const alone: CurveCompany = { dots: [], others: [], showsWideBand: false }

/** A line and the straight one between its ends, each named on its outer side where they lie farthest apart. */
function namedApart(line: PlotPoint[], name: string): PlotLine[] {
  const straight = [line[0]!, line[line.length - 1]!]
  const gap = (x: number) => valueAt(line, x) - valueAt(straight, x)
  const nameAt = Array.from({ length: 51 }, (_, i) => 25 + i).reduce((best, x) => Math.abs(gap(x)) > Math.abs(gap(best)) ? x : best)
  const isAbove = gap(nameAt) > 0
  return [
    { points: line, name, nameAt, nameSide: isAbove ? 'above' : 'below' },
    { points: straight, name: 'straight line', nameAt, nameSide: isAbove ? 'below' : 'above', kind: 'dashed' },
  ]
}

/** Other versions, named at places apart from one another. */
const beside = (others: CurveCompany['others'], lineOf: (curve: ChartCurve) => PlotPoint[]): PlotLine[] =>
  others.map(({ name, curve }, i) => ({ points: lineOf(curve), name, nameAt: 20 + 17 * (i % 4), nameSide: i % 2 ? 'below' : 'above', kind: 'other' }))

/** Print lightness against ink, with the patches that were read and the straight line that no bench follows. */
export function responsePlot(curve: ChartCurve, { dots, others, showsWideBand }: CurveCompany, name: string): Plot {
  const line = responseLine(curve)
  const ys = [...dots.flatMap(d => d.points), ...line, ...others.flatMap(o => responseLine(o.curve))].map(p => p.y)
  return {
    x: perCentAxis, y: roundAxis(Math.min(...ys), Math.max(...ys), plain), dots, band: responseBand(curve), wideBand: showsWideBand ? wideBand(curve) : undefined,
    lines: [...namedApart(line, name), ...beside(others, responseLine)],
    tell: p => `Ink ${plain(p.x)} %, print L* ${plain(p.y)}, D ${formatDecimal(densityFromLightness(p.y), 2)}`,
  }
}

/** What is left over, patch by patch, on a scale on which the band can be seen. */
export function leftOverPlot(curve: ChartCurve, { dots, others, showsWideBand }: CurveCompany): Plot {
  const { points, band } = leftOver(curve, dots.map(d => d.points))
  const wide: Band | undefined = showsWideBand ? wideBand(curve) && aboutLine(curve, wideBand(curve)!) : undefined
  const ys = [...points.flat(), ...band.lower, ...band.upper, ...wide?.lower ?? [], ...wide?.upper ?? []].map(p => p.y)
  return {
    x: perCentAxis, y: roundAxisAboutZero(ys, 1, value => formatSigned(value, 1)), dots: dots.map((d, i) => ({ ...d, points: points[i]! })), band, wideBand: wide,
    lines: [
      { points: [{ x: 0, y: 0 }, { x: 100, y: 0 }], name: '', nameAt: 0, nameSide: 'above' },
      ...beside(others, other => aboutLine(curve, { lower: [], upper: responseLine(other) }).upper),
    ],
    tell: p => `Ink ${plain(p.x)} %: band ${formatSigned(valueAt(band.lower, p.x), 1)} to ${formatSigned(valueAt(band.upper, p.x), 1)} L*`,
  }
}

/** The curve as the film takes it: ink against wanted tone. */
export function tonePlot(curve: ChartCurve, { others }: CurveCompany, name: string): Plot {
  return {
    x: perCentAxis, y: perCentAxis, band: toneBand(curve),
    lines: [...namedApart(toneLine(curve), name), ...beside(others, toneLine)],
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
    x: perCentAxis, y: roundAxis(Math.min(...ys), Math.max(...ys), value => formatDecimal(value, digits)), dots: [{ points, mark: 'circle' }],
    lines: [{ points, name: '', nameAt: 0, nameSide: 'above' }], tell: p => `Ink ${plain(p.x)} %: ${formatDecimal(p.y, 2)}`,
  }
}
