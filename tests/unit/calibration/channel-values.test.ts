import { describe, expect, it } from 'vitest'
import { channelValue, filterDensity } from '../../../shared/calibration/channel-values'
import { colourPathOf, pathLength, shareAlongPath } from '../../../shared/calibration/colour-path'
import { densityFromLightness } from '../../../shared/tone/density'
import type { LabPoint } from '../../../shared/tone/looks'

describe('a reading channel', () => {
  it('of neutral patches is their lightness behind every filter: density by definition', () => {
    for (const channel of ['density-red', 'density-green', 'density-blue'] as const) {
      expect(filterDensity([50, 0, 0], channel)).toBeCloseTo(densityFromLightness(50), 3)
      expect(channelValue({ lightness: 50, lab: [50, 0, 0] }, channel, null)).toBeCloseTo(50, 2)
    }
  })

  it('sees a yellow layer through blue, which lightness hardly sees (gum falls only from L* 95 to 86)', () => {
    const fall = (channel: 'lightness' | 'density-blue'): number =>
      channelValue({ lightness: 95, lab: [95, 0, 3] }, channel, null) - channelValue({ lightness: 86, lab: [86, 0, 80] }, channel, null)
    expect(fall('lightness')).toBe(9)
    expect(fall('density-blue')).toBeGreaterThan(40)
  })

  it('takes typed densities as they are, and refuses a colour path without colours', () => {
    expect(channelValue({ lightness: 40, lab: null }, 'density-blue', null)).toBe(40)
    expect(() => channelValue({ lightness: 40, lab: null }, 'colour-path', null)).toThrowError(expect.objectContaining({ code: 'reading_unfit' }))
  })
})

describe('a bench’s colour path', () => {
  // Straight in CIELAB from (95, 0, 5) to (25, −10, −45): ΔE*ab = √(70² + 10² + 50²), CIE 15:2004, 8.2.1.3.
  const colour = (level: number): LabPoint => [25 + 70 * level, -10 + 10 * level, -45 + 50 * level]
  const patches = Array.from({ length: 60 }, (_, i) => ({ level: i / 59, lab: colour(i / 59) }))
  const path = colourPathOf(patches)

  it('goes from paper to the deepest tone along the patches’ colours', () => {
    expect(path).toHaveLength(65)
    expect(path[0]![0]).toBeCloseTo(95, 1)
    expect(path.at(-1)![2]).toBeCloseTo(-45, 1)
    expect(pathLength(path)).toBeCloseTo(Math.hypot(70, 10, 50), 1)
    expect(colourPathOf([...patches].reverse())).toEqual(path)
  })

  it('counts from the deepest tone, 0, to paper, 100, and drops a colour beside it onto itself', () => {
    expect(channelValue({ lightness: 60, lab: colour(0.5) }, 'colour-path', path)).toBeCloseTo(50, 1)
    expect(shareAlongPath(path, [100, 1, 9])).toBeCloseTo(1, 2)
    // 10 aside, at a right angle to (70, 10, 50): (−1, 7, 0)/√50.
    const [l, a, b] = colour(0.25)
    expect(shareAlongPath(path, [l - 10 / Math.sqrt(50), a + 70 / Math.sqrt(50), b])).toBeCloseTo(0.25, 2)
  })
})
