import Color from 'colorjs.io'
import { converter } from 'culori'
import { describe, expect, it } from 'vitest'
import { seededRandom } from '../../../shared/calibration/random'
import { lightnessFromLuminance } from '../../../shared/tone/lightness'
import { transform } from '../../../shared/tone/matrix'
import { mixLuminance, mixToTonePlane, mixWeights, neutralMix } from '../../../shared/tone/mix'
import { codeFromLinear, linearFromCode, workingFromXyz, workingLuminanceRow } from '../../../shared/tone/working-space'
import { greatestDifference } from '../../support/check-values'

/** Working-space codes of a colour, by way of colorjs.io's D50 XYZ. */
function codesOf(colour: string): [number, number, number] {
  const xyz = new Color(colour).to('xyz-d50').coords as unknown as [number, number, number]
  return transform(workingFromXyz, xyz).map(v => Math.round(codeFromLinear(Math.min(1, Math.max(0, v))))) as [number, number, number]
}

function toneOf(colour: string, mix = neutralMix): number {
  const out = new Uint16Array(1)
  mixToTonePlane(Uint16Array.from(codesOf(colour)), mixWeights(mix), out)
  return out[0]! / 655.35
}

describe('neutral mix', () => {
  it('is Y of D50 XYZ', () => {
    expect(greatestDifference(mixWeights(neutralMix), workingLuminanceRow)).toBeLessThan(1e-15)
  })

  it('keeps every grey code', () => {
    const channels = new Uint16Array(3 * 65536).map((_, i) => Math.floor(i / 3))
    const out = new Uint16Array(65536)
    mixToTonePlane(channels, mixWeights(neutralMix), out)
    expect(out.every((code, i) => code === i)).toBe(true)
  })

  it.each([
    'color(display-p3 1 0.5 0)', 'color(display-p3 1 0 0)', 'color(display-p3 0 1 0)', 'color(a98-rgb 0 1 0)', 'color(a98-rgb 0.9 0.2 0.4)',
    'color(srgb 0.2 0.4 0.9)', 'color(rec2020 0.1 0.9 0.3)', 'color(prophoto-rgb 0.3 0.6 0.2)',
  ])('gives %s the L* that two colour libraries give', (colour) => {
    const byColorjs = new Color(colour).to('lab').coords[0] as unknown as number
    const byCulori = converter('lab')(colour.replace('prophoto-rgb', 'prophoto-rgb'))!.l
    expect(Math.abs(byColorjs - byCulori)).toBeLessThan(0.05)
    expect(Math.abs(toneOf(colour) - byColorjs)).toBeLessThan(0.05)
  })
})

describe('a mix of one channel', () => {
  it('is that channel of linear sRGB', () => {
    for (const [mix, channel] of [[{ red: 1, green: 0, blue: 0 }, 0], [{ red: 0, green: 1, blue: 0 }, 1], [{ red: 0, green: 0, blue: 1 }, 2]] as const) {
      const wanted = new Color('color(srgb 0.7 0.45 0.3)').to('srgb-linear').coords[channel] as unknown as number
      expect(toneOf('color(srgb 0.7 0.45 0.3)', mix)).toBeCloseTo(lightnessFromLuminance(wanted), 1)
    }
  })

  it('keeps white and grey', () => {
    expect(toneOf('white', { red: 0, green: 0, blue: 1 })).toBeCloseTo(100, 2)
    expect(toneOf('gray', { red: 2, green: -0.5, blue: 1 })).toBeCloseTo(toneOf('gray'), 1)
  })
})

describe('any mix', () => {
  it('is the clipped weighted sum, in floating point, within half a code and table error', () => {
    const random = seededRandom(7)
    const channels = Uint16Array.from({ length: 3 * 20_000 }, () => random.below(65536))
    const before = channels.slice()
    const weights = mixWeights({ red: 2.3, green: -0.4, blue: 1.7 })
    const out = new Uint16Array(20_000)
    mixToTonePlane(channels, weights, out)
    expect(channels).toEqual(before)
    for (let i = 0; i < out.length; i++) {
      const sum = weights[0] * linearFromCode(channels[3 * i]!) + weights[1] * linearFromCode(channels[3 * i + 1]!) + weights[2] * linearFromCode(channels[3 * i + 2]!)
      if (!(Math.abs(out[i]! - codeFromLinear(Math.min(1, Math.max(0, sum)))) <= 0.52)) expect.fail(`pixel ${i}`)
    }
  })

  it('is refused when nothing is left of white, or a share is out of range', () => {
    const refused = [{ red: 0, green: 0, blue: 0 }, { red: 3, green: -1, blue: -2 }, { red: Number.NaN, green: 1, blue: 1 }, { red: 4, green: 1, blue: 1 }]
    for (const mix of refused) expect(() => mixWeights(mix)).toThrowError(expect.objectContaining({ code: 'invalid_input' }))
    expect(mixLuminance({ red: 0, green: 0, blue: 1 })).toBeGreaterThan(0.05)
  })

  it('needs three codes a pixel', () => {
    expect(() => mixToTonePlane(new Uint16Array(5), [1, 0, 0], new Uint16Array(2))).toThrowError(expect.objectContaining({ code: 'invalid_input' }))
  })
})
