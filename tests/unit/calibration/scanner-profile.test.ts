import { describe, expect, it } from 'vitest'
import { correctPatch, makeScannerProfile } from '../../../shared/calibration/scanner-profile'

/** A consumer scanner's kind of error: lifted shadows and a bent middle (invented). */
const scannedFrom = (lightness: number): number => 6 + 0.93 * lightness - 2.5 * Math.sin(Math.PI * lightness / 100)
const scale = (values: number[]) => values.map(measured => ({ scanned: scannedFrom(measured), measured }))
const greys = Array.from({ length: 18 }, (_, i) => 12 + 84 * i / 17)
const codes = (warnings: { code: string }[]): string[] => warnings.map(w => w.code)

describe('a scanner profile', () => {
  it('gives the true lightness back, within 0.1 L* between 18 greys', () => {
    const { correct, warnings, from, to } = makeScannerProfile(scale(greys))
    for (let l = 12; l <= 96; l += 0.5) expect(Math.abs(correct(scannedFrom(l)).lightness - l)).toBeLessThan(0.1)
    expect(warnings).toEqual([])
    expect([from, to]).toEqual([scannedFrom(12), scannedFrom(96)])
  })

  it('rises along the whole scale, and is honest beyond its points: the ends’ shift is held', () => {
    const { correct } = makeScannerProfile(scale(greys))
    let before = -1
    for (let l = 0; l <= 100; l += 0.25) {
      const { lightness } = correct(l)
      expect(lightness).toBeGreaterThanOrEqual(before)
      before = lightness
    }
    const end = scannedFrom(12)
    expect(correct(end - 3)).toEqual({ lightness: expect.closeTo(9, 9), isOutside: true })
    expect(correct(end + 3).isOutside).toBe(false)
    expect(correct(100).isOutside).toBe(true)
  })

  it('evens noise out: the order of points does not matter, equal greys are averaged', () => {
    const noisy = scale(greys).flatMap(p => [{ ...p, measured: p.measured + 0.5 }, { ...p, measured: p.measured - 0.5 }])
    const [profile, plain] = [makeScannerProfile([...noisy].reverse()), makeScannerProfile(scale(greys))]
    for (let l = 20; l < 90; l += 7) expect(profile.correct(l).lightness).toBeCloseTo(plain.correct(l).lightness, 9)
  })

  it('corrects tone, not colour', () => {
    const profile = makeScannerProfile(scale(greys))
    const patch = { lightness: scannedFrom(50), lab: [scannedFrom(50), -4, -36] as [number, number, number], level: 0.4 }
    expect(correctPatch(profile, patch)).toEqual({ level: 0.4, lightness: expect.closeTo(50, 1), lab: [expect.closeTo(50, 1), -4, -36] })
    expect(correctPatch(profile, { lightness: null, lab: null })).toEqual({ lightness: null, lab: null })
  })

  it('warns of clipped, stretched and disordered scans', () => {
    const cut = scale(greys).map(p => ({ ...p, scanned: Math.min(100, p.scanned * 1.15) }))
    expect(codes(makeScannerProfile(cut).warnings)).toContain('clipped_light')
    const dark = scale(greys).map(p => ({ ...p, scanned: Math.max(0, p.scanned - 28) }))
    expect(codes(makeScannerProfile(dark).warnings)).toContain('clipped_dark')
    const stretched = greys.map(measured => ({ measured, scanned: 100 * (measured - 12) / 84 }))
    expect(codes(makeScannerProfile(stretched).warnings)).toEqual(['auto_levelled'])
    const swapped = scale(greys).map((p, i, all) => ({ ...p, measured: all[i === 8 ? 9 : i === 9 ? 8 : i]!.measured }))
    expect(codes(makeScannerProfile(swapped).warnings)).toEqual(['not_monotone'])
    expect(codes(makeScannerProfile(scale([10, 20, 30, 60, 75, 90])).warnings)).toEqual(['wide_gap', 'few_points'])
  })

  it('is refused where it would tell nothing', () => {
    expect(() => makeScannerProfile(scale([20, 40, 60, 80]))).toThrowError(expect.objectContaining({ code: 'too_few_levels' }))
    expect(() => makeScannerProfile(scale([50, 52, 54, 56, 58, 60]))).toThrowError(expect.objectContaining({ code: 'range_too_small' }))
    expect(() => makeScannerProfile(scale(greys).map(p => ({ ...p, measured: 100 - p.measured })))).toThrowError(expect.objectContaining({ code: 'levels_unrelated' }))
    expect(() => makeScannerProfile([...scale(greys), { scanned: 101, measured: 50 }])).toThrowError(expect.objectContaining({ code: 'invalid_input' }))
  })
})
