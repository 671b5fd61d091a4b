import { describe, expect, it } from 'vitest'
import { checkCurve } from '../../../shared/calibration/curve-check'
import { seededRandom } from '../../../shared/calibration/random'
import { layoutWedge } from '../../../shared/calibration/wedge-layout'
import { curveLevels } from '../../../shared/tone/levels'
import { valueAt } from '../../../shared/tone/response'
import { printPatches, printQualities } from '../../support/simulator/print'
import { drawSystem } from '../../support/simulator/system'

const grid = Array.from({ length: 1025 }, (_, i) => i / 1024)

/** A wedge whose cells hold tones, printed through a curve that is wrong by `bump` L* in the middle. */
function secondWedge(seed: number, bump: number, quality = printQualities.typical) {
  const random = seededRandom(seed)
  const system = drawSystem(random, { exposureScaleFrom: 1.2, exposureScaleTo: 2.2 })
  const response = grid.map(level => system.lightness(level))
  const levels = curveLevels(response, 'even-lightness')
  const { cells, widthMm, heightMm } = layoutWedge({ grid: '24x16', seed })
  const plan = cells.map(({ level: tone, x, y }) => ({ tone, x, y, xMm: x * widthMm / 2, yMm: y * heightMm / 2, level: valueAt(levels, tone), pixels: 3800 }))
  const printed = printPatches(system, plan, quality, random)
  const patches = plan.map(({ tone, x, y, xMm, yMm }, i) => ({ tone, x, y, xMm, yMm, lightness: printed[i]! + bump * Math.sin(Math.PI * tone) ** 2 }))
  return { patches, curve: { aim: 'even-lightness' as const, black: response[0]!, white: response[1024]! } }
}

describe('a curve checked by a second wedge', () => {
  it('does not count single patches and uneven coating as its error', () => {
    const results = Array.from({ length: 3 }, (_, seed) => {
      const { patches, curve } = secondWedge(seed, 0)
      const raw = Math.max(...patches.map(p => Math.abs(p.lightness - curve.black - p.tone * (curve.white - curve.black))))
      return { raw, ...checkCurve(patches, curve) }
    })
    results.forEach(({ raw, greatest, mean }) => {
      expect(raw).toBeGreaterThan(2)
      expect(greatest).toBeLessThan(0.9)
      expect(mean).toBeLessThan(0.45)
    })
    // What is found is what the noise alone would give, about.
    expect(results.map(r => r.greatest).sort((a, b) => a - b)[1]!).toBeLessThan(2 * results.map(r => r.noiseAlone.p95).sort((a, b) => a - b)[1]!)
  })

  it('finds an error where it is', () => {
    const { patches, curve } = secondWedge(3, 3)
    const check = checkCurve(patches, curve)
    expect(check.greatest).toBeGreaterThan(2.5)
    expect(check.greatest).toBeLessThan(3.6)
    expect(Math.abs(check.greatestAtTone - 0.5)).toBeLessThan(0.15)
    expect(check.greatest).toBeGreaterThan(check.noiseAlone.p95)
    const middle = check.points[16]!
    expect(middle.tone).toBe(0.5)
    expect(middle.printed - middle.aimed).toBeCloseTo(3, 0)
    expect(middle.low).toBeLessThanOrEqual(middle.printed)
  })

  it('works from a few measured tones without places', () => {
    const tones = Array.from({ length: 21 }, (_, i) => i / 20)
    const check = checkCurve(tones.map(tone => ({ tone, lightness: 20 + 75 * tone + 2 * Math.sin(Math.PI * tone) })), { aim: 'even-lightness', black: 20, white: 95 })
    expect(check.greatest).toBeCloseTo(2, 0)
    expect(check.points).toHaveLength(33)
    expect(() => checkCurve([{ tone: 0, lightness: 20 }], { aim: 'even-lightness', black: 20, white: 95 })).toThrowError(expect.objectContaining({ code: 'too_few_levels' }))
  })
})
