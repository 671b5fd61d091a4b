import { formatSigned } from './figures'
import { perCentAxis, plain, roundAxis, roundAxisAboutZero, type Plot } from './plot-chart'

/** A tone of a wedge printed through a curve: what was aimed at and what came, L*, with the band that the patches' noise leaves. */
export interface CheckedTone { tone: number, aimed: number, printed: number, low: number, high: number }

/** What came against what was aimed at; along the dashed line the curve would be perfect. */
export function checkPlot(points: readonly CheckedTone[]): Plot {
  const at = (of: (p: CheckedTone) => number) => points.map(p => ({ x: p.tone * 100, y: of(p) }))
  const ys = points.flatMap(p => [p.aimed, p.low, p.high])
  return {
    x: perCentAxis, y: roundAxis(Math.min(...ys), Math.max(...ys), plain), band: { lower: at(p => p.low), upper: at(p => p.high) },
    lines: [
      { points: at(p => p.printed), name: 'printed', nameAt: 60, nameSide: 'below' },
      { points: at(p => p.aimed), name: 'aimed at', nameAt: 40, nameSide: 'above', kind: 'dashed' },
    ],
    tell: p => `Tone ${plain(p.x)} %, printed L* ${plain(p.y)}`,
  }
}

/** The same as a difference, on a scale on which it can be seen. */
export function checkLeftOverPlot(points: readonly CheckedTone[]): Plot {
  const at = (of: (p: CheckedTone) => number) => points.map(p => ({ x: p.tone * 100, y: of(p) - p.aimed }))
  const [line, lower, upper] = [at(p => p.printed), at(p => p.low), at(p => p.high)]
  return {
    x: perCentAxis, y: roundAxisAboutZero([...line, ...lower, ...upper].map(p => p.y), 1, value => formatSigned(value, 1)), band: { lower, upper },
    lines: [{ points: line, name: '', nameAt: 0, nameSide: 'above' }, { points: [{ x: 0, y: 0 }, { x: 100, y: 0 }], name: '', nameAt: 0, nameSide: 'above', kind: 'dashed' }],
    tell: p => `Tone ${plain(p.x)} %: ${formatSigned(p.y, 1)} L*`,
  }
}
