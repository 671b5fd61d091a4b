// Expected values: colorjs.io, L* (D50) of colours given by their coordinates in each space; Debian's icc-profiles-free for a foreign profile.
import { existsSync, readFileSync } from 'node:fs'
import Color from 'colorjs.io'
import sharp from 'sharp'
import { describe, expect, it } from 'vitest'
import { adobeCurve, gamma, greyProfile, matrixProfile, parametric, sampled, srgbCurve } from '../../support/pictures/profiles'
import { pngFile } from '../../support/pictures/png-file'
import { filmOrder, openWorkbench, tonesFrom } from '../../support/pictures/workbench'

const bench = openWorkbench()
const colours: [number, number, number][] = [
  [1, 0.5, 0], [1, 0, 0], [0, 1, 0], [0, 0, 1], [1, 1, 0], [0, 1, 1], [1, 0, 1], [0.9, 0.35, 0.1], [0.2, 0.4, 0.1],
  [0.05, 0.02, 0.3], [0.01, 0.01, 0.01], [0.5, 0.5, 0.5], [1, 1, 1], [0, 0, 0], [0.8, 0.6, 0.5], [0.1, 0.7, 0.9],
]

async function lightnessOf(samples: number[], bitDepth: 8 | 16, channels: 1 | 2 | 3 | 4, icc?: Buffer): Promise<number[]> {
  const width = samples.length / channels
  const path = bench.keep(pngFile({ width, height: 1, bitDepth, channels, samples, icc }))
  const { target } = await bench.film(path, filmOrder(width, 1))
  return [...tonesFrom(bench.vipsSamples(target))].map(code => code / 655.35)
}

const expected = (space: string, codes: number[], greatest: number) =>
  Array.from({ length: codes.length / 3 }, (_, i) => new Color(space, [0, 1, 2].map(c => codes[3 * i + c]! / greatest) as [number, number, number]).to('lab').coords[0]!)

function expectNear(actual: number[], wanted: number[], tolerance: number) {
  expect(actual).toHaveLength(wanted.length)
  wanted.forEach((lightness, i) => expect(Math.abs(actual[i]! - lightness), `colour ${i}: ${actual[i]} for ${lightness}`).toBeLessThanOrEqual(tolerance))
}

describe.each([
  ['Display P3', 'p3', matrixProfile('p3', srgbCurve())],
  ['Adobe RGB', 'a98rgb', matrixProfile('a98rgb', adobeCurve())],
  ['sRGB', 'srgb', matrixProfile('srgb', srgbCurve())],
  ['no profile', 'srgb', undefined],
] as const)('colours of %s', (_, space, icc) => {
  it.each([8, 16] as const)('come out at their L* within 0.1 (%i bit)', async (bitDepth) => {
    const greatest = 2 ** bitDepth - 1
    const codes = colours.flat().map(value => Math.round(value * greatest))
    expectNear(await lightnessOf(codes, bitDepth, 3, icc), expected(space, codes, greatest), 0.1)
  })
})

describe('profiles', () => {
  const debian = '/usr/share/color/icc/compatibleWithAdobeRGB1998.icc'
  it.skipIf(!existsSync(debian))('of another maker give the same L*', async () => {
    const codes = colours.flat().map(value => Math.round(value * 255))
    expectNear(await lightnessOf(codes, 8, 3, readFileSync(debian)), expected('a98rgb', codes, 255), 0.1)
  })

  it('in a JPEG are honoured as in a PNG', async () => {
    const pixels = Buffer.from(colours.flatMap(colour => Array.from({ length: 16 * 16 }, () => colour.map(v => Math.round(v * 255))).flat()))
    // Each colour is a block of 16 × 16 stacked downwards; the codes that the JPEG holds come from the decoder without profile.
    const plain = await sharp(pixels, { raw: { width: 16, height: 16 * colours.length, channels: 3 } }).jpeg({ quality: 100, chromaSubsampling: '4:4:4' }).toBuffer()
    const icc = matrixProfile('p3', srgbCurve())
    const segment = Buffer.concat([Buffer.from([0xFF, 0xE2, 0, 0]), Buffer.from('ICC_PROFILE\0\x01\x01', 'latin1'), icc])
    segment.writeUInt16BE(segment.length - 2, 2)
    const path = bench.keep(Buffer.concat([plain.subarray(0, 2), segment, plain.subarray(2)]))
    const stored = await sharp(plain).raw().toBuffer()
    const { target } = await bench.film(path, filmOrder(16, 16 * colours.length))
    const actual = [...tonesFrom(bench.vipsSamples(target))].map(code => code / 655.35)
    expectNear(actual, expected('p3', [...stored], 255), 0.1)
  })

  it('keep white white and black black to the code', async () => {
    for (const icc of [matrixProfile('p3', srgbCurve()), matrixProfile('a98rgb', adobeCurve()), greyProfile(gamma(2.2)), undefined]) {
      const channels = icc?.includes('GRAY') ? 1 : 3
      const samples = channels === 1 ? [0, 255] : [0, 0, 0, 255, 255, 255]
      expect((await lightnessOf(samples, 8, channels, icc)).map(l => Math.round(l * 655.35))).toEqual([0, 65535])
    }
  })

  it('of grey: exponent, table and parametric curve give L* of their own definition', async () => {
    const greys = [0, 20, 77, 128, 200, 255]
    const lightness = (y: number) => y > 216 / 24389 ? 116 * Math.cbrt(y) - 16 : y * 24389 / 27 // CIE 15:2004, 8.2.1.1
    const cases: [Buffer, (v: number) => number][] = [
      [gamma(1.8), v => v ** (Math.round(1.8 * 256) / 256)],
      [sampled([0, 0.1, 0.3, 1]), v => v <= 1 / 3 ? 0.3 * v : v <= 2 / 3 ? 0.1 + 0.6 * (v - 1 / 3) : 0.3 + 2.1 * (v - 2 / 3)],
      [parametric(0, [2.0]), v => v ** 2],
    ]
    for (const [curve, linear] of cases) expectNear(await lightnessOf(greys, 8, 1, greyProfile(curve)), greys.map(v => lightness(linear(v / 255))), 0.02)
  })

  it('that are broken or of another kind than the picture count as none', async () => {
    const greys = [0, 60, 128, 255]
    const plain = await lightnessOf(greys, 8, 1)
    expect(await lightnessOf(greys, 8, 1, Buffer.from('not a profile at all'))).toEqual(plain)
    expect(await lightnessOf(greys, 8, 1, matrixProfile('p3', srgbCurve()))).toEqual(plain)
    expect(await lightnessOf(greys, 8, 1, matrixProfile('p3', srgbCurve()).subarray(0, 140))).toEqual(plain)
  })
})

describe('what the engine does not compute itself', () => {
  it('is converted by the library: a CMYK JPEG comes out at the L* of its conversion to sRGB, within 0.6', async () => {
    const greys = [0, 64, 128, 192, 255]
    const pixels = Buffer.from(greys.flatMap(grey => Array.from({ length: 256 }, () => [grey, grey, grey]).flat()))
    const cmyk = await sharp(pixels, { raw: { width: 16, height: 16 * greys.length, channels: 3 } }).toColourspace('cmyk').jpeg({ quality: 100 }).toBuffer()
    const converted = await sharp(cmyk).raw().toBuffer()
    const { target } = await bench.film(bench.keep(cmyk), filmOrder(16, 16 * greys.length))
    const tones = tonesFrom(bench.vipsSamples(target))
    // one 8-bit step of sRGB is up to 0.5 L*
    const middles = greys.map((_, i) => 16 * (16 * i + 8) + 8)
    expectNear(middles.map(at => tones[at]! / 655.35), expected('srgb', middles.flatMap(at => [...converted.subarray(3 * at, 3 * at + 3)]), 255), 0.6)
  })
})

describe('transparency', () => {
  it('lies over white, in light', async () => {
    const lightness = (y: number) => 116 * Math.cbrt(y) - 16 // CIE 15:2004, 8.2.1.1
    const half = 128 / 255
    expectNear(await lightnessOf([0, 0, 0, 0, 0, 0, 0, 255, 0, 0, 0, 128], 8, 4), [100, 0, lightness(1 - half)], 0.01)
    expectNear(await lightnessOf([0, 0, 0, 128], 8, 2), [100, lightness(1 - half)], 0.01)
    expectNear(await lightnessOf([0, 0, 0, 65535], 16, 2), [100, 0], 0.01)
  })
})
