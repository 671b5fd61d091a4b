/**
 * What room codes and personal codes are written in: 18 capitals and digits of which no two look nearly alike in
 * handwriting or on a projector (6 without G, no B 8, D O Q 0, I L 1, S 5, Z 2, U V), and without vowels, so that no code reads as a word.
 */
export const codeAlphabet = 'CFHJKMNPRTWXY34679'

/** Characters of a room code: 18⁸ ≈ 1.1 · 10¹⁰ codes (33 bits), against a limited number of guesses a quarter of an hour. */
export const roomCodeLength = 8
/** Characters of a personal code: 18¹² ≈ 1.2 · 10¹⁵ codes (50 bits). */
export const personalCodeLength = 12

/** A code as it is stored and compared: capitals without the spaces, hyphens and dots that people put between groups. */
export const normaliseCode = (typed: string): string => typed.normalize('NFKC').toUpperCase().replace(/[\s.\-–—]/g, '')

/** A code as it is shown: groups of four, `CFGH JKMN`. */
export const showCode = (code: string): string => code.replace(/(.{4})(?=.)/g, '$1 ')

/** Whether a normalised text can be a code of so many characters. */
export const isCode = (code: string, length: number): boolean => code.length === length && [...code].every(letter => codeAlphabet.includes(letter))
