import { describe, expect, it } from 'vitest'
import { seededRandom } from '#shared/calibration/random'
import { formatIdentity, identityAlphabet, identityFromBytes, parseIdentity } from '#shared/calibration/wedge/identity-code'

const random = seededRandom(20)
const someCode = (): string => identityFromBytes(Uint8Array.from({ length: 9 }, () => random.below(256)))

describe('a wedge’s code', () => {
  it('has ten characters without look-alikes', () => {
    expect(new Set(identityAlphabet).size).toBe(32)
    expect(identityAlphabet).not.toMatch(/[01IO]/)
    for (let i = 0; i < 100; i++) expect(someCode()).toMatch(/^[2-9A-HJ-NP-Z]{10}$/)
  })

  it('is read back with spaces, a hyphen and small letters', () => {
    const code = someCode()
    expect(parseIdentity(formatIdentity(code))).toBe(code)
    expect(parseIdentity(` ${code.toLowerCase()} `)).toBe(code)
  })

  it('is refused with any one character changed: all 310 of each of 20 codes', () => {
    for (let n = 0; n < 20; n++) {
      const code = someCode()
      for (let i = 0; i < code.length; i++) {
        for (const character of identityAlphabet) {
          if (character !== code[i]) expect(parseIdentity(code.slice(0, i) + character + code.slice(i + 1))).toBeNull()
        }
      }
    }
  })

  it('is refused with any two different characters exchanged', () => {
    for (let n = 0; n < 50; n++) {
      const code = [...someCode()]
      for (let i = 0; i < 10; i++) {
        for (let j = i + 1; j < 10; j++) {
          if (code[i] === code[j]) continue
          const exchanged = code.map((c, k) => k === i ? code[j]! : k === j ? code[i]! : c).join('')
          expect(parseIdentity(exchanged), `${code.join('')} ${exchanged}`).toBeNull()
        }
      }
    }
  })

  it('is refused when too short, too long, or of foreign characters', () => {
    const code = someCode()
    for (const text of ['', code.slice(1), `${code}2`, `0${code.slice(1)}`, 'https://example.org/']) expect(parseIdentity(text)).toBeNull()
  })
})
