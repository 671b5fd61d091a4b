import { describe, expect, it } from 'vitest'
import { isInkModule, markerCodes, turnedPattern } from '#shared/calibration/wedge/marker-codes'

const distance = (a: number, b: number): number => (a ^ b).toString(2).replaceAll('0', '').length
const ways = [0, 1, 2, 3, 4, 5, 6, 7]

describe('the markers’ patterns', () => {
  it('differ in at least four modules, however two of them lie', () => {
    for (const [i, a] of markerCodes.entries()) {
      for (const b of markerCodes.slice(i + 1)) {
        expect(Math.min(...ways.map(k => distance(a, turnedPattern(b, k)))), `${i}`).toBeGreaterThanOrEqual(4)
      }
    }
  })

  it('tell by themselves how they lie: turned or mirrored they differ from themselves in at least four modules', () => {
    for (const code of markerCodes) expect(Math.min(...ways.slice(1).map(k => distance(code, turnedPattern(code, k))))).toBeGreaterThanOrEqual(4)
  })

  it('come back after four quarter turns and after two mirrorings', () => {
    const fourTurns = (code: number): number => [1, 2, 3, 4].reduce(turned => turnedPattern(turned, 1), code)
    for (const code of markerCodes) {
      expect(fourTurns(code)).toBe(code)
      expect(turnedPattern(turnedPattern(code, 4), 4)).toBe(code)
    }
  })

  it('are framed with full ink', () => {
    for (let i = 0; i < 6; i++) {
      for (const [row, column] of [[0, i], [5, i], [i, 0], [i, 5]] as const) expect(isInkModule(0, row, column)).toBe(true)
    }
    expect(isInkModule(0, 1, 1)).toBe(false)
    expect(isInkModule(1, 1, 1)).toBe(true)
  })
})
