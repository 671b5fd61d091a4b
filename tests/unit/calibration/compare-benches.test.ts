import { describe, expect, it } from 'vitest'
import { benchFigures, compareBenches } from '../../../shared/calibration/compare-benches'
import { densityFromLightness } from '../../../shared/tone/density'

const straight = (from: number, to: number): number[] => Array.from({ length: 1025 }, (_, i) => from + (to - from) * i / 1024)
const combination = { 'paper': 'Rope walk 300', 'film': 'clear', 'lamp': 'bank of tubes', 'recipe: coats': '1' }

describe('two benches', () => {
  it('are compared by range, deepest tone and contrast (derived for straight lines)', () => {
    const { paperLightness, deepestLightness, maxDensity, densityRange, contrast } = benchFigures(straight(20, 95))
    expect([paperLightness, deepestLightness]).toEqual([95, 20])
    expect(contrast).toBeCloseTo(0.75, 9)
    expect(maxDensity).toBeCloseTo(densityFromLightness(20), 9)
    expect(densityRange).toBeCloseTo(densityFromLightness(20) - densityFromLightness(95), 9)
  })

  it('have more contrast where the same range takes less ink', () => {
    const steep = straight(20, 95).map((_, i, all) => all[Math.min(1024, 2 * i)]!)
    expect(benchFigures(steep).contrast).toBeCloseTo(1.5, 2)
  })

  it('warn when more than one part differs, name what differs, and say nothing of one', () => {
    const bench = (changes: Record<string, string>) => ({ name: 'Bench', response: straight(20, 95), combination: { ...combination, ...changes } })
    expect(compareBenches(bench({}), bench({ paper: 'Slip 200' }))).toMatchObject({ differences: [{ part: 'paper', first: 'Rope walk 300', second: 'Slip 200' }], warnings: [] })
    const two = compareBenches(bench({}), bench({ 'paper': 'Slip 200', 'recipe: coats': '2' }))
    expect(two.warnings).toEqual([{ code: 'several_changes', message: expect.stringMatching(/^2 things differ.*paper, recipe: coats/) }])
    expect(compareBenches(bench({}), bench({})).warnings.map(w => w.code)).toEqual(['same_combination'])
    expect(compareBenches(bench({ toner: 'gold' }), bench({})).differences).toEqual([{ part: 'toner', first: 'gold', second: 'not given' }])
  })
})
