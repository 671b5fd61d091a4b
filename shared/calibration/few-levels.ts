import type { LevelMean } from './levels'
import { isotonic } from './isotonic'
import { pchip } from './pchip'
import { seededRandom } from './random'
import type { FittedCurve } from './response-fit'
import { levelGrid } from './smooth-fit'

/** Scatter of a patch, L*, taken while a reading is too small to tell its own. Common practice, no source. */
const assumedScatter = 1

/**
 * Isotonic regression of the levels' means and a PCHIP through it. The draws shift each mean by a stated scatter of 1 L*
 * (over the root of its patches): so few levels do not tell their own.
 */
export function fitFewLevels(levels: readonly LevelMean[], drawCount: number): FittedCurve {
  const random = seededRandom(1)
  const through = (means: readonly number[]): Float64Array => {
    const interpolant = pchip(levels.map(l => l.level), [...isotonic(means, levels.map(l => l.count))])
    return levelGrid.map(interpolant)
  }
  const draw = (): Float64Array => through(levels.map(l => l.lightness + random.normal() * assumedScatter / Math.sqrt(l.count)))
  return { curve: through(levels.map(l => l.lightness)), draws: Array.from({ length: drawCount }, draw) }
}
