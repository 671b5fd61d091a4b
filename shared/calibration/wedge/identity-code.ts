/**
 * The code on a wedge's film: nine characters that name the film and a check character, of 32 characters without
 * look-alikes (no 0, 1, I, O). Ten characters fill a QR code of 21 × 21 modules at its strongest error correction
 * (ISO/IEC 18004:2015, table 7: version 1-H holds 10 alphanumeric characters).
 */
export const identityAlphabet = '23456789ABCDEFGHJKLMNPQRSTUVWXYZ'
/** Characters before the check character. */
export const identityLength = 9

/** GF(2⁵) by the primitive polynomial x⁵ + x² + 1: powers of its root. */
const powers = fieldPowers()

/**
 * A code from random bytes: the low five bits of each of the first nine make the characters; the check character follows.
 * Needs at least 9 bytes from a cryptographic source; 2⁴⁵ codes.
 */
export function identityFromBytes(bytes: Uint8Array): string {
  const values = Array.from(bytes.subarray(0, identityLength), byte => byte & 31)
  return [...values, checkValue(values)].map(value => identityAlphabet[value]).join('')
}

/**
 * The code in capital letters without spaces and hyphens, or null when it is no code of ours: wrong length, a character
 * outside the alphabet, or a check that fails. One wrong character, or two exchanged, always fails.
 */
export function parseIdentity(text: string): string | null {
  const code = text.toUpperCase().replace(/[\s-]/g, '')
  if (code.length !== identityLength + 1) return null
  const values = [...code].map(character => identityAlphabet.indexOf(character))
  if (values.some(value => value < 0)) return null
  return checkValue(values.slice(0, -1)) === values.at(-1) ? code : null
}

/** As people read it: two groups of five. */
export const formatIdentity = (code: string): string => `${code.slice(0, 5)}-${code.slice(5)}`

/** Σ αⁱ⁺¹·cᵢ over GF(32); all weights differ and none is 1 or 0, which is what finds exchanges, the check's own too. */
const checkValue = (values: number[]): number => values.reduce((sum, value, i) => sum ^ times(powers[i + 1]!, value), 0)

function times(a: number, b: number): number {
  if (a === 0 || b === 0) return 0
  return powers[(powers.indexOf(a) + powers.indexOf(b)) % 31]!
}

function fieldPowers(): number[] {
  const out = [1]
  while (out.length < 31) {
    const doubled = out.at(-1)! << 1
    out.push(doubled & 32 ? doubled ^ 0b100101 : doubled)
  }
  return out
}
