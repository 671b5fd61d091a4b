import { describe, expect, it } from 'vitest'
import { seededRandom } from '#shared/calibration/random'
import { flatFieldFrom } from '#shared/calibration/reading/flat-field'
import type { GlareReference } from '#shared/calibration/reading/glare'
import { fitGlare, glareRadiiMm, noGlare, withoutGlare } from '#shared/calibration/reading/glare'
import { lightnessFromLuminance, luminanceFromLightness } from '#shared/tone/lightness'

/** 384 cells of random levels; the light around each is random too (squares of like size alike), and `shares` of it get in. `noise` in L*. */
function cells(shares: readonly number[], noise: number, seed = 1): { references: GlareReference[], truth: number[] } {
  const random = seededRandom(seed)
  const total = shares.reduce((sum, s) => sum + s, 0)
  const truth: number[] = []
  const references = Array.from({ length: 384 }, (_, i): GlareReference => {
    const level = random.uniform()
    const lightness = 15 + 80 * level ** 1.4
    truth.push(lightness)
    const near = random.uniform() - 0.5
    const aroundLuminance = glareRadiiMm.map((_, r) => 0.3 + (0.3 - 0.06 * r) * (0.7 * near + 0.5 * (random.uniform() - 0.5)))
    const luminance = (1 - total) * luminanceFromLightness(lightness + noise * random.normal()) + shares.reduce((sum, s, r) => sum + s * aroundLuminance[r]!, 0)
    return { atMm: [i % 24 * 7, Math.floor(i / 24) * 7], level, luminance, aroundLuminance }
  })
  return { references, truth }
}

describe('stray light', () => {
  it('of known shares is found again to a tenth of itself on an even print', () => {
    const shares = [0.002, 0.01, 0.006, 0]
    const glare = fitGlare(cells(shares, 0).references)
    expect(Math.abs(glare.total - 0.018)).toBeLessThan(0.0018)
  })

  it('is found within a half of itself on prints uneven by half an L* from cell to cell, and then reads truer: 10 prints', () => {
    for (let seed = 1; seed <= 10; seed++) {
      const { references, truth } = cells([0.002, 0.01, 0.006, 0], 0.5, seed)
      const glare = fitGlare(references)
      expect(Math.abs(glare.total - 0.018)).toBeLessThan(0.009)
      const bias = (light: (r: GlareReference) => number): number => Math.abs(references.reduce((sum, r, i) => sum + lightnessFromLuminance(light(r)) - truth[i]!, 0) / references.length)
      const corrected = bias(r => withoutGlare([0, r.luminance, 0], r.aroundLuminance.map(y => [0, y, 0] as const), glare)[1])
      expect(corrected).toBeLessThan(bias(r => r.luminance))
    }
  })

  it('is not claimed where there is none: 40 uneven prints', () => {
    const claimed = Array.from({ length: 40 }, (_, seed) => fitGlare(cells([0, 0, 0, 0], 1.5, seed).references)).filter(glare => glare.total > 0)
    expect(claimed).toHaveLength(0)
  })

  it('is not looked for with too few patches', () => {
    expect(fitGlare(cells([0.02, 0, 0, 0], 0).references.slice(0, 50))).toEqual(noGlare)
  })
})

describe('a flat field', () => {
  const places = Array.from({ length: 14 }, (_, i): [number, number] => [i % 5 * 48, Math.floor(i / 5) * 60])
  const light = ([x, y]: readonly [number, number]): number => 0.9 - 0.0015 * x - 0.001 * y + 2e-6 * x * y

  it('makes a tone read alike everywhere under light that falls by a third', () => {
    const field = flatFieldFrom(places.map(p => ({ atMm: p, luminance: 0.8 * light(p) })), places.map(p => ({ atMm: p, luminance: 0.03 * light(p) })))!
    const read = places.map(p => lightnessFromLuminance(field(p, [0.2, 0.2 * light(p), 0.2])[1]))
    expect(Math.max(...read) - Math.min(...read)).toBeLessThan(0.2)
  })

  it('leaves even light alone, and counts a spoiled reference little', () => {
    const whites = places.map(p => ({ atMm: p, luminance: 0.8 }))
    const blacks = places.map(p => ({ atMm: p, luminance: 0.03 }))
    const spoiled = whites.map((w, i) => i === 6 ? { ...w, luminance: 0.4 } : w)
    const even = flatFieldFrom(whites, blacks)!([100, 60], [0.3, 0.3, 0.3])[1]
    expect(even).toBeCloseTo(0.3, 6)
    const read = [0, 13].map(i => flatFieldFrom(spoiled, blacks)!(places[i]!, [0.3, 0.3, 0.3])[1])
    expect(Math.abs(lightnessFromLuminance(read[0]!) - lightnessFromLuminance(read[1]!))).toBeLessThan(0.5)
  })

  it('is none with fewer than four references', () => {
    expect(flatFieldFrom(places.slice(0, 3).map(p => ({ atMm: p, luminance: 0.8 })), [])).toBeNull()
  })
})
