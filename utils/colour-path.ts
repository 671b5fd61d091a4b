import type { LabPoint } from '#shared/tone/looks'
import { lookColour } from '#shared/tone/palettes'

/** The path with paper white first, whichever way it came. */
export const fromPaper = (path: readonly LabPoint[]): LabPoint[] => [...path].sort((a, b) => b[0] - a[0])

/** A path's colours at so many even steps of its lightness, paper white first, as CSS takes them. */
export function pathColours(given: readonly LabPoint[], steps = 21): string[] {
  const path = fromPaper(given)
  const [white, deepest] = [path[0]![0], path.at(-1)![0]]
  return Array.from({ length: steps }, (_, i) => `rgb(${lookColour(path, white + (deepest - white) * i / (steps - 1)).join(' ')})`)
}
