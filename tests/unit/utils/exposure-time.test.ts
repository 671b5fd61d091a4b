import { describe, expect, it } from 'vitest'
import { readSeconds, formatExposure } from '../../../utils/exposure-time'

describe('readSeconds', () => {
  it.each([['260', 260], ['4:20', 260], ['4 min 20 s', 260], ['4min20', 260], ['4,5 min', 270], ['1 h 10 min', 4200], ['0.5 s', 0.5]])('reads %s', (text, seconds) => {
    expect(readSeconds(text)).toBe(seconds)
  })

  it.each(['', '0', '4:75', 'long', '-20', '4 min min', '1.2.3'])('refuses “%s”', (text) => {
    expect(readSeconds(text)).toBeNull()
  })
})

describe('formatExposure', () => {
  it.each([[260, '4 min 20 s'], [300, '5 min'], [4200, '1 h 10 min'], [7.25, '7.3 s'], [59.6, '1 min']])('writes %d s as %s', (seconds, text) => {
    expect(formatExposure(seconds)).toBe(text)
  })

  it('is read back as the same whole seconds', () => {
    for (const seconds of [11, 60, 61, 599, 3600, 3661, 86399]) expect(readSeconds(formatExposure(seconds))).toBe(seconds)
  })
})
