import type { ChartDataset, ChartOptions, Plugin } from 'chart.js'
import { valueAt, type Band, type PlotPoint } from './curve-chart'
import { formatDecimal } from './figures'

/** Shapes tell groups of points apart; their colours only help. */
export const markShapes = ['circle', 'triangle', 'diamond', 'cross', 'square', 'star'] as const
export type MarkShape = typeof markShapes[number]
/** The shape of the n-th group, from 0; after the last they begin again. */
export const markOf = (n: number): MarkShape => markShapes[n % markShapes.length]!

export interface PlotColours { ground: string, lit: string, text: string, quiet: string, hairline: string, line: string, band: string, wideBand: string, marks: Record<MarkShape, string> }
export interface PlotLine {
  points: PlotPoint[]
  name: string
  /** where along x the name stands, and on which side of the line */
  nameAt: number
  nameSide: 'above' | 'below'
  /** `main` unless said: `second` has equal weight, another version lies quietly beside it, a straight line or an aim is dashed */
  kind?: 'main' | 'second' | 'other' | 'dashed'
}
export interface PlotDots { points: PlotPoint[], mark: MarkShape, /** drawn large: few points that each count */ large?: boolean }
/** A place on the x axis: a line from bottom to top with its name, and how far it is known. */
export interface PlotPlace { x: number, name: string, low?: number | null, high?: number | null }
export interface PlotAxis { min: number, max: number, step: number, /** how a tick is written */ write: (value: number) => string, /** the greatest value stands at the bottom */ downwards?: boolean }
export interface Plot {
  x: PlotAxis
  y: PlotAxis
  lines: PlotLine[]
  dots?: PlotDots[]
  band?: Band
  /** lies under `band` */
  wideBand?: Band
  places?: PlotPlace[]
  /** what the pointer reads at a place on the first line */
  tell: (point: PlotPoint) => string
}

const font = { family: '\'IBM Plex Sans\', sans-serif', size: 13 }
const pointStyles = { circle: 'circle', triangle: 'triangle', diamond: 'rectRot', cross: 'crossRot', square: 'rect', star: 'star' } as const
/** Shapes of equal weight to the eye need unequal radii. */
const radii: Record<MarkShape, number> = { circle: 1.75, triangle: 2.6, diamond: 2.6, cross: 2.6, square: 2.2, star: 2.8 }
const isDrawnInLines = (mark: MarkShape) => mark === 'cross' || mark === 'star'

/** Bands first, then dots, then lines, so that the lines lie on top. */
export function plotDatasets(plot: Plot, colours: PlotColours): ChartDataset<'scatter'>[] {
  return [
    ...plot.wideBand ? bandDatasets(plot.wideBand, colours.wideBand) : [],
    ...plot.band ? bandDatasets(plot.band, colours.band) : [],
    ...(plot.dots ?? []).map(dots => dotsDataset(dots, colours.marks[dots.mark])),
    ...plot.lines.map((line, i) => ({
      data: line.points, showLine: true, label: i === 0 ? 'first' : line.name, pointRadius: 0, pointHitRadius: 0, pointHoverRadius: i === 0 ? 4 : 0,
      pointHoverBackgroundColor: colours.line, borderColor: lineColour(line, colours), borderWidth: isQuiet(line) ? 1 : 2, borderDash: dashes[line.kind ?? 'main'],
    })),
  ]
}

const dashes = { main: [], second: [9, 3], other: [], dashed: [5, 4] }
const isQuiet = (line: PlotLine) => line.kind === 'dashed' || line.kind === 'other'
const lineColour = (line: PlotLine, colours: PlotColours) => isQuiet(line) ? colours.quiet : line.kind === 'second' ? colours.marks.triangle : colours.line

function dotsDataset({ points, mark, large }: PlotDots, colour: string): ChartDataset<'scatter'> {
  return {
    data: points, showLine: false, label: 'dots', clip: false, pointStyle: pointStyles[mark], pointRadius: radii[mark] * (large ? 2.4 : 1), pointHitRadius: 0,
    pointBackgroundColor: colour, pointBorderColor: colour, pointBorderWidth: isDrawnInLines(mark) ? (large ? 2 : 1) : 0,
  }
}

function bandDatasets(band: Band, colour: string): ChartDataset<'scatter'>[] {
  const edge = { showLine: true, pointRadius: 0, pointHitRadius: 0, pointHoverRadius: 0, borderWidth: 0, label: 'band' }
  return [{ ...edge, data: band.lower }, { ...edge, data: band.upper, fill: '-1', backgroundColor: colour }]
}

export function plotOptions(plot: Plot, colours: PlotColours): ChartOptions<'scatter'> {
  const ticks = (axis: PlotAxis) => ({ stepSize: axis.step, color: colours.quiet, font, padding: 6, autoSkip: false, maxRotation: 0, callback: (value: string | number) => axis.write(Number(value)) })
  return {
    animation: false, responsive: true, maintainAspectRatio: false, normalized: true,
    layout: { padding: { right: 4, top: plot.places?.length ? 22 : 4 } },
    interaction: { mode: 'nearest', axis: 'x', intersect: false },
    scales: {
      x: { type: 'linear', min: plot.x.min, max: plot.x.max, grid: { display: false }, border: { color: colours.text }, ticks: { ...ticks(plot.x), align: 'inner' } },
      y: { type: 'linear', min: plot.y.min, max: plot.y.max, reverse: plot.y.downwards ?? false, grid: { color: colours.hairline, drawTicks: false }, border: { display: false }, ticks: ticks(plot.y) },
    },
    plugins: {
      tooltip: {
        filter: item => item.dataset.label === 'first', callbacks: { label: item => plot.tell(item.raw as PlotPoint) },
        displayColors: false, cornerRadius: 0, caretSize: 0, padding: 10, backgroundColor: colours.lit, bodyColor: colours.text, borderColor: colours.text, borderWidth: 1, bodyFont: { ...font, size: 14 },
      },
    },
  }
}

interface Drawn { plot: Plot, colours: PlotColours }

/** Writes each line's name where it runs, and places on the x axis. Read from the plot at drawing time, so that a change of theme or curve is followed. */
export function lineNames(read: () => Drawn): Plugin<'scatter'> {
  return {
    id: 'lineNames',
    beforeDatasetsDraw: chart => drawPlaces(chart, read()),
    afterDatasetsDraw({ ctx, scales, chartArea }) {
      const { plot, colours } = read()
      ctx.save()
      for (const line of plot.lines.filter(l => l.name !== '')) {
        const at = { x: line.nameAt, y: valueAt(line.points, line.nameAt) }
        ctx.font = `${isQuiet(line) ? 400 : 600} 13px 'IBM Plex Sans', sans-serif`
        ctx.fillStyle = lineColour(line, colours)
        ctx.textAlign = line.nameSide === 'above' ? 'right' : 'left'
        const x = scales.x!.getPixelForValue(at.x) + (line.nameSide === 'above' ? -10 : 12)
        const y = scales.y!.getPixelForValue(at.y) + (line.nameSide === 'above' ? -6 : 16)
        const width = ctx.measureText(line.name).width
        const left = line.nameSide === 'above' ? x - width : x
        const shift = Math.max(0, chartArea.left - left) - Math.max(0, left + width - chartArea.right)
        ctx.fillText(line.name, x + shift, y)
      }
      ctx.restore()
    },
  }
}

type DrawnChart = Parameters<NonNullable<Plugin<'scatter'>['beforeDatasetsDraw']>>[0]

function drawPlaces({ ctx, scales, chartArea }: DrawnChart, { plot, colours }: Drawn): void {
  ctx.save()
  ctx.font = '600 13px \'IBM Plex Sans\', sans-serif'
  const at = (x: number) => Math.min(chartArea.right, Math.max(chartArea.left, scales.x!.getPixelForValue(x)))
  for (const place of plot.places ?? []) {
    if (typeof place.low === 'number' && typeof place.high === 'number') {
      ctx.fillStyle = colours.band
      ctx.fillRect(at(place.low), chartArea.top, at(place.high) - at(place.low), chartArea.height)
    }
    ctx.fillStyle = colours.line
    ctx.fillRect(at(place.x) - 0.75, chartArea.top, 1.5, chartArea.height)
    const half = ctx.measureText(place.name).width / 2
    ctx.textAlign = 'center'
    ctx.fillText(place.name, Math.min(chartArea.right - half, Math.max(chartArea.left + half, at(place.x))), chartArea.top - 8)
  }
  ctx.restore()
}

/** Round bounds and a step that gives four to six ticks. */
export function roundAxis(least: number, greatest: number, write: (value: number) => string): PlotAxis {
  const step = [0.02, 0.05, 0.1, 0.2, 0.5, 1, 2, 5, 10, 20, 25].find(s => (greatest - least) / s <= 5) ?? 25
  return { min: Math.floor(least / step) * step, max: Math.ceil(greatest / step) * step, step, write }
}

/** Round bounds alike above and below zero, for what is left over. */
export function roundAxisAboutZero(values: readonly number[], least: number, write: (value: number) => string): PlotAxis {
  const reach = Math.max(least, ...values.map(Math.abs))
  const bound = reach > 4 ? Math.ceil(reach / 2) * 2 : Math.ceil(reach)
  return { min: -bound, max: bound, step: bound, write }
}

/** 0 to 100, the last with its sign. */
export const perCentAxis: PlotAxis = { min: 0, max: 100, step: 25, write: value => value === 100 ? '100 %' : String(value) }
export const plain = (value: number) => formatDecimal(value, 1)
