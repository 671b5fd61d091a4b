import { describe, expect, it } from 'vitest'
import { readInkTrial } from '../../../shared/calibration/ink-trial'
import { seededRandom } from '../../../shared/calibration/random'
import { lightnessFromDensity } from '../../../shared/tone/density'
import { paperCurve } from '../../support/simulator/paper'

const share = paperCurve('logistic', 1.6)
const names = ['weak mix', 'fitting mix', 'strong mix', 'very strong mix']
/** Full-ink UV densities of the mixes: the exposure scale is 1.6, so white takes a little more than that. */
const fullInk = [0.9, 2.4, 3.6, 6]
const print = (density: number): number => lightnessFromDensity(0.07 + 1.3 * share(-density))

function trial(rough: number[], seed = 1) {
  const random = seededRandom(seed)
  return fullInk.flatMap((full, mix) => Array.from({ length: 24 }, (_, i) => ({ mix, level: i / 23, lightness: Math.min(100, print(full * i / 23) + rough[mix]! * random.normal()), deviation: rough[mix]! })))
}

describe('an ink trial', () => {
  it('recommends the mix that blocks just enough, and says why', () => {
    const { recommended, why, mixes, paperLightness } = readInkTrial(trial([0.3, 0.3, 0.3, 0.3]), names)
    expect(recommended).toBe(1)
    expect(why).toMatch(/^fitting mix prints paper white from \d+ % on/)
    expect(mixes[0]!.whiteFrom).toBeNull()
    expect(mixes[1]!.whiteFrom!).toBeGreaterThan(mixes[2]!.whiteFrom!)
    expect(mixes[2]!.whiteFrom!).toBeGreaterThan(mixes[3]!.whiteFrom!)
    // Where the model's own print comes within 1 L* of that paper, derived
    const truth = Array.from({ length: 1001 }, (_, i) => i / 1000).find(n => print(fullInk[1]! * n) >= paperLightness - 1)!
    expect(Math.abs(mixes[1]!.whiteFrom! - truth)).toBeLessThan(0.06)
    expect(mixes[1]!.whiteFromLow!).toBeLessThanOrEqual(mixes[1]!.whiteFrom!)
  })

  it('counts from foil where it was read', () => {
    const withFoil = readInkTrial(trial([0.1, 0.1, 0.1, 0.1]), names, 99)
    expect(withFoil.recommended).toBeNull()
    expect(withFoil.why).toContain('No mix holds back enough UV')
  })

  it('reports range and roughness', () => {
    const { mixes } = readInkTrial(trial([0.2, 0.2, 2, 0.2]), names)
    expect(mixes[2]!.roughness).toBeGreaterThan(3 * mixes[1]!.roughness)
    expect(mixes[1]!.range).toBeGreaterThan(mixes[0]!.range)
    expect(mixes[2]!.grain).toBe(2)
  })

  it('prefers the smoother of mixes that use as much', () => {
    const random = seededRandom(4)
    const patches = [2.4, 2.5].flatMap((full, mix) => Array.from({ length: 24 }, (_, i) => ({ mix, level: i / 23, lightness: print(full * i / 23) + (mix === 0 ? 1.2 : 0.1) * random.normal() })))
    const { recommended, mixes } = readInkTrial(patches, ['rough', 'smooth'])
    expect(mixes[1]!.roughness).toBeLessThan(mixes[0]!.roughness)
    expect(recommended).toBe(1)
  })

  it('is refused when a mix has too few patches', () => {
    expect(() => readInkTrial(trial([0.1, 0.1, 0.1, 0.1]).filter(p => p.mix !== 2 || p.level < 0.2), names)).toThrowError(expect.objectContaining({ code: 'too_few_levels', message: expect.stringContaining('strong mix') }))
  })
})
