import { channelValue } from '#shared/calibration/channel-values'
import type { ReadingChannel } from '#shared/schemas/benches'
import type { Curve, Reading } from '#shared/schemas/curves'
import { densityFromLightness } from '#shared/tone/density'

export interface PlotPoint { x: number, y: number }
export type ChartCurve = Pick<Curve, 'points' | 'response'> & Partial<Pick<Curve, 'bandOfAll'>>

/** The bench's response: print lightness (y) against ink in per cent (x). */
export const responseLine = (curve: ChartCurve): PlotPoint[] => curve.response.map((y, i) => ({ x: i / (curve.response.length - 1) * 100, y }))

/** What the film says: ink in per cent (y) against wanted tone in per cent (x). */
export const toneLine = (curve: ChartCurve): PlotPoint[] => curve.points.map(p => ({ x: p.tone * 100, y: p.level * 100 }))

export interface Band { lower: PlotPoint[], upper: PlotPoint[] }

/** The 95 % band of the tone curve, in ink per cent. */
export const toneBand = (curve: ChartCurve): Band => ({
  lower: curve.points.map(p => ({ x: p.tone * 100, y: p.levelLow * 100 })),
  upper: curve.points.map(p => ({ x: p.tone * 100, y: p.levelHigh * 100 })),
})

/** The same band seen in the print: where more ink might be needed the print may come out darker than the line. */
export function responseBand(curve: ChartCurve): Band {
  const line = responseLine(curve)
  const lightness = curve.points.map(p => valueAt(line, p.level * 100))
  return {
    lower: curve.points.map((p, i) => ({ x: p.levelHigh * 100, y: lightness[i]! })),
    upper: curve.points.map((p, i) => ({ x: p.levelLow * 100, y: lightness[i]! })),
  }
}

/** The 95 % band that holds for all ink levels at once, where the fit gives one. */
export function wideBand({ bandOfAll }: ChartCurve): Band | undefined {
  if (!bandOfAll) return undefined
  const edge = (values: number[]) => values.map((y, i) => ({ x: i / (values.length - 1) * 100, y }))
  return { lower: edge(bandOfAll.low), upper: edge(bandOfAll.high) }
}

type Patch = Reading['patches'][number]

/** Every patch that was read: ink in per cent and its value; lightness, or what `valueOf` makes of it. Null leaves a patch out. */
export const measuredPoints = (readings: readonly Pick<Reading, 'patches'>[], valueOf: (patch: Patch) => number | null = patch => patch.lightness): PlotPoint[] =>
  readings.flatMap(reading => reading.patches).flatMap((patch) => {
    const value = patch.lightness === null || !patch.used ? null : valueOf(patch)
    return value === null ? [] : [{ x: patch.level * 100, y: value }]
  })

/** A patch's value in a bench's reading channel; null where the channel asks for a colour that was not read. */
export function valueInChannel(channel: ReadingChannel, path: Curve['colourPath']): (patch: Patch) => number | null {
  return ({ lightness, lab }) => {
    if (lightness === null || (channel === 'colour-path' && !(lab && path))) return null
    return channelValue({ lightness, lab }, channel, path)
  }
}

/** Linear interpolation in a line of increasing x; held at its ends. */
export function valueAt(line: readonly PlotPoint[], x: number): number {
  let low = 0
  let high = line.length - 1
  if (x <= line[low]!.x) return line[low]!.y
  if (x >= line[high]!.x) return line[high]!.y
  while (high - low > 1) {
    const middle = (low + high) >> 1
    if (line[middle]!.x <= x) low = middle
    else high = middle
  }
  const a = line[low]!
  const b = line[high]!
  return b.x === a.x ? a.y : a.y + (b.y - a.y) * (x - a.x) / (b.x - a.x)
}

/** A band, or a line as its one edge, less the curve at every 2 % of ink, in L*. */
export function aboutLine(curve: ChartCurve, band: Band): Band {
  const line = responseLine(curve)
  const less = (edge: PlotPoint[]) => edge.length === 0 ? [] : Array.from({ length: 51 }, (_, i) => ({ x: i * 2, y: valueAt(edge, i * 2) - valueAt(line, i * 2) }))
  return { lower: less(band.lower), upper: less(band.upper) }
}

/** What is left over: measured less curve in L*, group by group, with the band about the curve. */
export function leftOver(curve: ChartCurve, measured: readonly (readonly PlotPoint[])[]): { points: PlotPoint[][], band: Band } {
  const line = responseLine(curve)
  return {
    points: measured.map(group => group.map(p => ({ x: p.x, y: p.y - valueAt(line, p.x) }))),
    band: aboutLine(curve, responseBand(curve)),
  }
}

export interface CurveRow { tone: number, lightness: number, density: number, ink: number, inkLow: number, inkHigh: number }

/** The table beside the chart: tone in per cent, print lightness, absolute density, ink in per cent with its 95 % band. */
export function curveRows(curve: ChartCurve, steps = 21): CurveRow[] {
  const ink = toneLine(curve)
  const response = responseLine(curve)
  const band = toneBand(curve)
  return Array.from({ length: steps }, (_, i) => {
    const tone = i / (steps - 1)
    const inkAtTone = valueAt(ink, tone * 100)
    const lightness = valueAt(response, inkAtTone)
    return {
      tone: tone * 100, lightness, density: densityFromLightness(lightness), ink: inkAtTone, inkLow: valueAt(band.lower, tone * 100), inkHigh: valueAt(band.upper, tone * 100),
    }
  })
}
