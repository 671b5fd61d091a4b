import type { ChartDataset, ChartOptions, Plugin } from 'chart.js'
import { valueAt, type Band, type PlotPoint } from './curve-chart'

export interface PlotColours { ground: string, lit: string, text: string, quiet: string, hairline: string, line: string, band: string }
export interface PlotLine { points: PlotPoint[], name: string, /** where along x the name stands, and on which side of the line */ nameAt: number, nameSide: 'above' | 'below', dashed?: boolean }
export interface PlotAxis { min: number, max: number, step: number, /** how a tick is written */ write: (value: number) => string }
export interface Plot { x: PlotAxis, y: PlotAxis, lines: PlotLine[], dots?: PlotPoint[], band?: Band, /** what the pointer reads at a place on the first line */ tell: (point: PlotPoint) => string }

const font = { family: '\'IBM Plex Sans\', sans-serif', size: 13 }

/** Band first, then dots, then lines, so that the lines lie on top. */
export function plotDatasets(plot: Plot, colours: PlotColours): ChartDataset<'scatter'>[] {
  return [
    ...plot.band ? bandDatasets(plot.band, colours) : [],
    ...plot.dots ? [{ data: plot.dots, showLine: false, pointRadius: 1.75, pointBackgroundColor: colours.quiet, pointBorderWidth: 0, pointHitRadius: 0, label: 'dots' }] : [],
    ...plot.lines.map((line, i) => ({
      data: line.points, showLine: true, label: i === 0 ? 'first' : line.name, pointRadius: 0, pointHitRadius: 0, pointHoverRadius: i === 0 ? 4 : 0,
      pointHoverBackgroundColor: colours.line, borderColor: line.dashed ? colours.quiet : colours.line,
      borderWidth: line.dashed ? 1 : 2, borderDash: line.dashed ? [5, 4] : [],
    })),
  ]
}

function bandDatasets(band: Band, colours: PlotColours): ChartDataset<'scatter'>[] {
  const edge = { showLine: true, pointRadius: 0, pointHitRadius: 0, pointHoverRadius: 0, borderWidth: 0, label: 'band' }
  return [{ ...edge, data: band.lower }, { ...edge, data: band.upper, fill: '-1', backgroundColor: colours.band }]
}

export function plotOptions(plot: Plot, colours: PlotColours): ChartOptions<'scatter'> {
  const ticks = (axis: PlotAxis) => ({ stepSize: axis.step, color: colours.quiet, font, padding: 6, autoSkip: false, maxRotation: 0, callback: (value: string | number) => axis.write(Number(value)) })
  return {
    animation: false, responsive: true, maintainAspectRatio: false, normalized: true,
    layout: { padding: { right: 4, top: 4 } },
    interaction: { mode: 'nearest', axis: 'x', intersect: false },
    scales: {
      x: { type: 'linear', min: plot.x.min, max: plot.x.max, grid: { display: false }, border: { color: colours.text }, ticks: { ...ticks(plot.x), align: 'inner' } },
      y: { type: 'linear', min: plot.y.min, max: plot.y.max, grid: { color: colours.hairline, drawTicks: false }, border: { display: false }, ticks: ticks(plot.y) },
    },
    plugins: {
      tooltip: {
        filter: item => item.dataset.label === 'first', callbacks: { label: item => plot.tell(item.raw as PlotPoint) },
        displayColors: false, cornerRadius: 0, caretSize: 0, padding: 10, backgroundColor: colours.lit, bodyColor: colours.text, borderColor: colours.text, borderWidth: 1, bodyFont: { ...font, size: 14 },
      },
    },
  }
}

/** Writes each line's name where it runs. Read from the plot at drawing time, so that a change of theme or curve is followed. */
export function lineNames(read: () => { plot: Plot, colours: PlotColours }): Plugin<'scatter'> {
  return {
    id: 'lineNames',
    afterDatasetsDraw({ ctx, scales, chartArea }) {
      const { plot, colours } = read()
      ctx.save()
      for (const line of plot.lines.filter(l => l.name !== '')) {
        const at = { x: line.nameAt, y: valueAt(line.points, line.nameAt) }
        ctx.font = `${line.dashed ? 400 : 600} 13px 'IBM Plex Sans', sans-serif`
        ctx.fillStyle = line.dashed ? colours.quiet : colours.line
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

/** Round bounds and a step that gives four to six ticks. */
export function roundAxis(least: number, greatest: number, write: (value: number) => string): PlotAxis {
  const step = [0.02, 0.05, 0.1, 0.2, 0.5, 1, 2, 5, 10, 20, 25].find(s => (greatest - least) / s <= 5) ?? 25
  return { min: Math.floor(least / step) * step, max: Math.ceil(greatest / step) * step, step, write }
}
