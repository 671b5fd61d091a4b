import type { ScannerProfile } from '#shared/schemas/calibration'
import type { PlotPoint } from './curve-chart'
import { formatDecimal, formatFixed, formatSigned } from './figures'
import { plain, roundAxisAboutZero, type Plot } from './plot-chart'

type Pair = ScannerProfile['points'][number]
const lightnessAxis = { min: 0, max: 100, step: 25, write: (value: number) => String(value) }

/** How far the scan is off at each lightness: what was measured less what the scan says; beyond the ends the shift is held. */
export function profilePlot(points: readonly Pair[]): Plot {
  const shifts = [...points].sort((a, b) => a.scanned - b.scanned).map(({ scanned, measured }): PlotPoint => ({ x: scanned, y: measured - scanned }))
  const held = shifts.length ? [{ x: 0, y: shifts[0]!.y }, ...shifts, { x: 100, y: shifts.at(-1)!.y }] : []
  const mean = shifts.reduce((sum, p) => sum + p.y, 0) / Math.max(1, shifts.length)
  return {
    x: lightnessAxis, y: roundAxisAboutZero(shifts.map(p => p.y), 1, value => formatSigned(value, 1)), dots: [{ points: shifts, mark: 'circle', large: true }],
    lines: [
      { points: held.length ? held : [{ x: 0, y: 0 }, { x: 100, y: 0 }], name: '', nameAt: 0, nameSide: 'above' },
      { points: [{ x: 0, y: 0 }, { x: 100, y: 0 }], name: 'as scanned', nameAt: 35, nameSide: mean < 0 ? 'above' : 'below', kind: 'dashed' },
    ],
    tell: p => `Scanned L* ${plain(p.x)}: ${formatSigned(p.y, 1)} L*`,
  }
}

/** `L* 14.2 to 94.6; the largest shift is −3.1 L*`. */
export function profileReach({ points, from, to }: Pick<ScannerProfile, 'points' | 'from' | 'to'>): string {
  const greatest = points.reduce((most, { scanned, measured }) => Math.abs(measured - scanned) > Math.abs(most) ? measured - scanned : most, 0)
  return `From scanned L* ${formatFixed(from, 1)} to ${formatFixed(to, 1)}; the largest shift is ${formatSigned(greatest, 1)} L*. Beyond, the ends’ shift is held.`
}

/** A grid’s place in words, counted from the top left as the print reads. */
export function placesOf(patches: readonly { xMm: number, yMm: number }[]): { row: number, column: number }[] {
  const rank = (values: number[]) => {
    const sorted = [...new Set(values.map(v => Math.round(v * 10)))].sort((a, b) => a - b)
    return (v: number) => sorted.indexOf(Math.round(v * 10)) + 1
  }
  const [rowOf, columnOf] = [rank(patches.map(p => p.yMm)), rank(patches.map(p => p.xMm))]
  return patches.map(p => ({ row: rowOf(p.yMm), column: columnOf(p.xMm) }))
}

/** So many patches spread evenly over the scanned lightnesses, deepest first, by their place in the reading. */
export function patchesToMeasure(patches: readonly { lightness: number | null, used: boolean }[], count = 12): number[] {
  const read = patches.flatMap(({ lightness, used }, patch) => lightness !== null && used ? [{ patch, lightness }] : [])
  if (read.length <= count) return read.map(p => p.patch)
  const [least, greatest] = [Math.min(...read.map(p => p.lightness)), Math.max(...read.map(p => p.lightness))]
  const chosen = new Set<number>()
  for (let i = 0; i < count; i++) {
    const wanted = least + (greatest - least) * i / (count - 1)
    const free = read.filter(p => !chosen.has(p.patch))
    chosen.add(free.reduce((best, p) => Math.abs(p.lightness - wanted) < Math.abs(best.lightness - wanted) ? p : best).patch)
  }
  return [...chosen]
}

export const lightnessText = (value: number): string => `L* ${formatDecimal(value, 1)}`
