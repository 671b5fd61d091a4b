import type { Comparison } from '#shared/schemas/calibration'
import { responseLine, valueAt } from './curve-chart'
import { formatFixed } from './figures'
import { perCentAxis, plain, roundAxis, type Plot } from './plot-chart'

type Compared = Comparison['benches'][number]
/** Two benches may bear one name; then the versions tell them apart. */
const nameOf = (one: Compared, other: Compared) => one.name === other.name ? `${one.name}, curve ${one.version}` : one.name

/** Both benches' print lightness against ink, on the same axes; each named on its outer side where they lie farthest apart. */
export function comparisonPlot([first, second]: Comparison['benches']): Plot {
  const lines = [first, second].map(one => responseLine({ points: [], response: one.response }))
  const gap = (x: number) => valueAt(lines[0]!, x) - valueAt(lines[1]!, x)
  const at = Array.from({ length: 41 }, (_, i) => 30 + i).reduce((best, x) => Math.abs(gap(x)) > Math.abs(gap(best)) ? x : best)
  const firstAbove = gap(at) >= 0
  const ys = lines.flat().map(p => p.y)
  return {
    x: perCentAxis, y: roundAxis(Math.min(...ys), Math.max(...ys), plain),
    lines: [
      { points: lines[0]!, name: nameOf(first, second), nameAt: at, nameSide: firstAbove ? 'above' : 'below' },
      { points: lines[1]!, name: nameOf(second, first), nameAt: at, nameSide: firstAbove ? 'below' : 'above', kind: 'second' },
    ],
    tell: p => `Ink ${plain(p.x)} %: L* ${plain(p.y)} and ${plain(valueAt(lines[1]!, p.x))}`,
  }
}

/** Print lightness of both at even steps of ink, for the table beside the plot. */
export const comparisonRows = ([first, second]: Comparison['benches'], steps = 21) => Array.from({ length: steps }, (_, i) => {
  const at = (one: Compared) => valueAt(responseLine({ points: [], response: one.response }), i / (steps - 1) * 100)
  return { ink: i / (steps - 1) * 100, first: at(first), second: at(second) }
})

export interface ComparedFigure { name: string, says?: string, first: string, second: string }
/** What can be said of both in one figure each; evenness only where both have been measured for it. */
export function comparedFigures([first, second]: Comparison['benches']): ComparedFigure[] {
  const row = (name: string, write: (one: Compared) => string, says?: string): ComparedFigure => ({ name, says, first: write(first), second: write(second) })
  const evenness = (part: 'texture' | 'mottle' | 'gradient') => (one: Compared) => typeof one.evenness?.[part] === 'number' ? `${formatFixed(one.evenness[part], 1)} L*` : 'not measured'
  const hasEvenness = first.evenness ?? second.evenness
  return [
    row('Paper white', one => `L* ${formatFixed(one.paperLightness, 1)}`),
    row('Deepest tone', one => `L* ${formatFixed(one.deepestLightness, 1)}, D ${formatFixed(one.maxDensity, 2)}`),
    row('Range', one => `D ${formatFixed(one.densityRange, 2)}`, 'deepest tone above paper white'),
    row('Contrast', one => `${formatFixed(one.contrast, 2)} L*`, 'for each per cent of ink, in the middle tones'),
    ...hasEvenness
      ? [row('Texture', evenness('texture'), 'within a patch'), row('Mottle', evenness('mottle'), 'clouds in the coating'), row('Gradient', evenness('gradient'), 'from the middle to the side')]
      : [],
  ]
}
