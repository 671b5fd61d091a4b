import { describe, expect, it } from 'vitest'
import { tonalLosses, toneHistogram } from '../../../shared/tone/losses'

describe('tonal losses', () => {
  /** A print from L* 20 to 90, straight in tone. */
  const forecast = Float64Array.from({ length: 65536 }, (_, code) => 20 + 70 * code / 65535)

  it('count the pixels within half an L* of an end', () => {
    const plane = new Uint16Array(1000).fill(30000)
    plane.fill(0, 0, 18)
    plane.fill(65535, 18, 20)
    plane[20] = 65535 - 400
    plane[21] = 65535 - 600
    const { barePaper, deepest } = tonalLosses(toneHistogram(plane), forecast, 20, 90)
    expect(deepest).toBe(0.018)
    expect(barePaper).toBe(0.003)
  })

  it('of an empty picture are none', () => {
    expect(tonalLosses(new Uint32Array(65536), forecast, 20, 90)).toEqual({ barePaper: 0, deepest: 0 })
  })

  it('need whole tables', () => {
    expect(() => tonalLosses(new Uint32Array(256), forecast, 20, 90)).toThrowError(expect.objectContaining({ code: 'invalid_input' }))
  })
})
