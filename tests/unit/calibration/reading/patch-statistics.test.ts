import { describe, expect, it } from 'vitest'
import { seededRandom } from '#shared/calibration/random'
import { patchReader } from '#shared/calibration/reading/patch-statistics'
import type { ScanPicture } from '#shared/calibration/reading/picture'
import { srgb8, tone16 } from '#shared/calibration/reading/picture'
import { rect } from '#shared/calibration/wedge/page'
import { labFromXyz } from '#shared/tone/lab'

/** 100 × 100 pixels, one pixel a millimetre. */
const identity = ([x, y]: readonly [number, number]): [number, number] => [x, y]
const tonePicture = (lightnessAt: (i: number) => number): ScanPicture => ({
  width: 100, height: 100, channels: 1, colour: tone16(), codes: Uint16Array.from({ length: 10000 }, (_, i) => Math.round(655.35 * lightnessAt(i))),
})
const whole = rect(0, 0, 100)

describe('a patch', () => {
  it('of one tone reads as that tone, without spread', () => {
    for (const lightness of [3, 20, 50, 95]) {
      const read = patchReader(tonePicture(() => lightness), identity)(whole)!
      expect(read.lightness).toBeCloseTo(lightness, 2)
      expect(read.deviation).toBeLessThan(0.01)
    }
  })

  it('with texture of 3 L* reads its centre and its spread', () => {
    const random = seededRandom(1)
    const read = patchReader(tonePicture(() => 40 + 3 * random.normal()), identity)(whole)!
    expect(Math.abs(read.lightness - 40)).toBeLessThan(0.1)
    expect(Math.abs(read.deviation - 3)).toBeLessThan(0.15)
  })

  it('keeps its reading under dust and hairs on a twentieth of its pixels', () => {
    const random = seededRandom(2)
    const read = patchReader(tonePicture(() => random.uniform() < 0.05 ? (random.uniform() < 0.5 ? 5 : 90) : 60 + random.normal()), identity)(whole)!
    expect(Math.abs(read.lightness - 60)).toBeLessThan(0.1)
    expect(read.rejectedShare).toBeGreaterThan(0.04)
  })

  it('reads only its inner three quarters', () => {
    const read = patchReader(tonePicture((i) => {
      const [x, y] = [i % 100, Math.floor(i / 100)]
      return x < 12 || y < 12 || x >= 88 || y >= 88 ? 100 : 30
    }), identity)(whole)!
    expect(read.lightness).toBeCloseTo(30, 2)
    expect(read.count).toBe(75 * 75)
  })

  it('outside the picture is none', () => {
    expect(patchReader(tonePicture(() => 50), identity)(rect(60, 0, 100))).toBeNull()
  })

  it('of sRGB (64, 128, 192) has the L*a*b* that culori 4.0.2 gives (lab, D50): 51.623, −5.241, −40.271', () => {
    const codes = new Uint8Array(30000).map((_, i) => [64, 128, 192][i % 3]!)
    const read = patchReader({ width: 100, height: 100, channels: 3, colour: srgb8, codes }, identity)(whole)!
    expect(Math.abs(read.lightness - 51.623)).toBeLessThan(0.02)
    const [, a, b] = labFromXyz(read.xyz)
    expect(Math.hypot(a + 5.241, b + 40.271)).toBeLessThan(0.05)
    expect([read.clippedLightShare, read.clippedDarkShare]).toEqual([0, 0])
  })
})
