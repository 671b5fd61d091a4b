import type { Warning } from '../schemas/curves'
import { densityFromLightness } from '../tone/density'
import { positionOf, valueAt } from '../tone/response'

/** One side of a comparison: its response (1025 L*) and its combination, part by part, in words a person reads. */
export interface ComparedBench { name: string, response: ArrayLike<number>, combination: Readonly<Record<string, string>> }

export interface BenchFigures {
  paperLightness: number
  deepestLightness: number
  /** absolute density of the deepest tone, and how far it lies above the paper's */
  maxDensity: number
  densityRange: number
  /** L* that a per cent of ink adds in the middle: mean slope between a quarter and three quarters of the lightness range */
  contrast: number
}

export interface BenchDifference { part: string, first: string, second: string }
export interface BenchComparison { first: BenchFigures, second: BenchFigures, differences: BenchDifference[], warnings: Warning[] }

/** Range, deepest tone and contrast of a response. */
export function benchFigures(response: ArrayLike<number>): BenchFigures {
  const [deepest, paper] = [response[0]!, response[response.length - 1]!]
  const [dark, light] = [0.25, 0.75].map(share => positionOf(response, deepest + share * (paper - deepest))) as [number, number]
  const [maxDensity, paperDensity] = [densityFromLightness(Math.max(0.1, deepest)), densityFromLightness(paper)]
  return {
    paperLightness: paper, deepestLightness: deepest, maxDensity, densityRange: maxDensity - paperDensity,
    contrast: (valueAt(response, light) - valueAt(response, dark)) / Math.max(1e-6, 100 * (light - dark)),
  }
}

/**
 * Two benches side by side, and which parts of their combinations differ: exactly one lets a difference be laid at its door,
 * more do not, and the comparison says so. A part that only one bench has counts as a difference ("not given").
 */
export function compareBenches(first: ComparedBench, second: ComparedBench): BenchComparison {
  const parts = [...new Set([...Object.keys(first.combination), ...Object.keys(second.combination)])]
  const differences = parts.map(part => ({ part, first: first.combination[part] ?? notGiven, second: second.combination[part] ?? notGiven })).filter(d => d.first !== d.second)
  return { first: benchFigures(first.response), second: benchFigures(second.response), differences, warnings: warningsOf(differences) }
}

const notGiven = 'not given'

function warningsOf(differences: readonly BenchDifference[]): Warning[] {
  if (differences.length > 1) return [{ code: 'several_changes', message: `${differences.length} things differ between these benches (${differences.map(d => d.part).join(', ')}): no difference of the prints can be put down to one of them. Change one thing at a time.` }]
  if (differences.length === 0) return [{ code: 'same_combination', message: 'Both benches have the same combination, so what differs is how the prints were made.' }]
  return []
}
