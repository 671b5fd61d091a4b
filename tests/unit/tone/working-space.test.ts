import Color from 'colorjs.io'
import { describe, expect, it } from 'vitest'
import { d50, xyzFromSrgb } from '../../../shared/tone/colour-spaces'
import { invert, multiply, transform } from '../../../shared/tone/matrix'
import type { Vector3 } from '../../../shared/tone/matrix'
import { codeFromLinear, linearFromCode, linearTable, workingFromXyz, workingLuminanceRow, xyzFromWorking } from '../../../shared/tone/working-space'
import { checkValues, greatestDifference } from '../../support/check-values'

/** D50 XYZ by colorjs.io, an implementation not ours. */
const xyzD50 = (space: string, channels: [number, number, number]): Vector3 =>
  [...new Color(space, channels).to('xyz-d50').coords] as unknown as Vector3

describe('colour matrices', () => {
  it('use the connection space\'s white', () => {
    const { expected, tolerance } = checkValues<null, { X: number, Y: number, Z: number }>('icc.pcs')
    expect(greatestDifference(d50, [expected.X, expected.Y, expected.Z])).toBeLessThanOrEqual(tolerance)
    expect(greatestDifference(transform(xyzFromWorking, [1, 1, 1]), d50)).toBeLessThan(1e-15)
  })

  it('give sRGB the luminances that profiles hold', () => {
    const { expected } = checkValues<unknown, { Y_row_sRGB_D50_Bradford: number[] }>('rec709.weights')
    // The profile's row is rounded to s15Fixed16 and uses D65 as 0.9505, 1, 1.0890.
    expect(greatestDifference(xyzFromSrgb[1], expected.Y_row_sRGB_D50_Bradford)).toBeLessThan(1e-4)
  })

  it('agree with colorjs.io in sRGB and in ROMM RGB primaries', () => {
    for (const channels of [[1, 0, 0], [0, 1, 0], [0, 0, 1], [0.2, 0.5, 0.7]] as const) {
      expect(greatestDifference(transform(xyzFromSrgb, channels), xyzD50('srgb-linear', [...channels]))).toBeLessThan(3e-4)
      expect(greatestDifference(transform(xyzFromWorking, channels), xyzD50('prophoto-linear', [...channels]))).toBeLessThan(3e-4)
    }
  })

  it('invert', () => {
    const product = multiply(invert(xyzFromSrgb), xyzFromSrgb)
    expect(greatestDifference(product.flat(), [1, 0, 0, 0, 1, 0, 0, 0, 1])).toBeLessThan(1e-14)
  })
})

describe('working space', () => {
  it.each(['p3-linear', 'a98rgb-linear', 'rec2020-linear'])('holds every corner of %s, but for traces of blue', (space) => {
    for (let corner = 0; corner < 8; corner++) {
      const [red, green, blue] = transform(workingFromXyz, xyzD50(space, [corner & 1, (corner >> 1) & 1, (corner >> 2) & 1]))
      // The library's D50 differs from the profiles' in the fourth digit: white comes out as 1.0001, 1.0000, 1.0002.
      for (const channel of [red, green]) expect(Math.abs(channel - 0.5), `corner ${corner}`).toBeLessThan(0.5002)
      expect(Math.abs(blue - 0.5), `corner ${corner}`).toBeLessThan(0.503)
    }
  })

  it('weighs luminance so that white is 1', () => {
    expect(workingLuminanceRow[0] + workingLuminanceRow[1] + workingLuminanceRow[2]).toBeCloseTo(1, 15)
  })

  it('codes linear values by L* and takes every code back', () => {
    expect(codeFromLinear(0)).toBe(0)
    expect(codeFromLinear(1)).toBe(65535)
    expect(codeFromLinear(0.184186518512444)).toBeCloseTo(32767.5, 6)
    const table = linearTable()
    expect(table).toHaveLength(65536)
    for (let code = 0; code < 65536; code++) {
      if (Math.round(codeFromLinear(linearFromCode(code))) !== code) expect.fail(`code ${code}`)
      if (Math.abs(codeFromLinear(Math.min(1, table[code]!)) - code) > 0.01) expect.fail(`table at ${code}`)
    }
  })

  it('refuses what is no code and no linear value', () => {
    for (const f of [() => codeFromLinear(1.1), () => codeFromLinear(Number.NaN), () => linearFromCode(-1), () => linearFromCode(65536)])
      expect(f).toThrowError(expect.objectContaining({ code: 'invalid_input' }))
  })
})
