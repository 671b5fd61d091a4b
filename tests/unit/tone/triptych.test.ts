// Expected values are derived: an untouched photo shows L* = 100 · tone; even lightness spreads it straight over the response's reach.
import { describe, expect, it } from 'vitest'
import { neutralAdjustments } from '../../../shared/tone/adjustments'
import { stateLightness, stateLook, statePixels, triptychStates } from '../../../shared/tone/triptych'

const response = Array.from({ length: 1025 }, (_, i) => 20 + 75 * (i / 1024) ** 0.8)
const settings = { adjustments: neutralAdjustments, aim: 'even-lightness', response } as const

describe('the triptych’s states', () => {
  it('show the photo as it is, and the print spread evenly from deepest tone to paper', () => {
    const photo = stateLightness('photo', settings), print = stateLightness('print', settings)
    for (const code of [0, 1000, 32768, 65535]) {
      expect(photo[code]).toBeCloseTo(100 * code / 65535, 9)
      // straight lines between 1025 points of the curve and of the response: within 0.02 L*
      expect(Math.abs(print[code]! - (20 + 75 * code / 65535))).toBeLessThan(0.02)
    }
  })

  it('let the film darken as the photo lightens', () => {
    const film = stateLightness('film', settings)
    for (let code = 1; code <= 65535; code++) expect(film[code]!).toBeLessThanOrEqual(film[code - 1]!)
    expect(film[0]!).toBeGreaterThan(film[65535]! + 50)
  })

  it('take the process’s look for the print only, and amber for all in the dim room', () => {
    expect(triptychStates.map(state => stateLook(state, 'cyanotype'))).toEqual(['photo', 'film', 'cyanotype'])
    expect(triptychStates.map(state => stateLook(state, 'dim'))).toEqual(['dim', 'dim', 'dim'])
    for (const state of triptychStates) expect(statePixels(state, settings, 'dim').every(pixel => (pixel >>> 16 & 255) === 0)).toBe(true)
  })
})
