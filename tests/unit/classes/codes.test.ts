import { describe, expect, it } from 'vitest'
import { newPersonalCode, newRoomCode, hashOfPersonalCode } from '../../../server/services/class-codes'
import { codeAlphabet, isCode, normaliseCode, personalCodeLength, roomCodeLength, showCode } from '../../../shared/classes/codes'
import { firstName, roomCode } from '../../../shared/schemas/classes'
import { limitRules } from '../../../server/services/rate-limits'

// Expected values: by hand, from the alphabet's own rule.

describe('codes', () => {
  it('hold no two letters that look alike, and no vowel', () => {
    expect(new Set(codeAlphabet).size).toBe(18)
    for (const pair of ['B8', 'DO', '0O', 'Q0', 'G6', 'I1', 'L1', 'S5', 'Z2', 'UV']) expect([...pair].filter(letter => codeAlphabet.includes(letter)).length, pair).toBeLessThan(2)
    expect(codeAlphabet).not.toMatch(/[AEIOU]/)
  })
  it('are drawn from the whole alphabet, evenly at each place', () => {
    const drawn = Array.from({ length: 3600 }, newRoomCode)
    expect(drawn.every(code => isCode(code, roomCodeLength))).toBe(true)
    expect(new Set(drawn).size).toBe(3600)
    // 200 expected of each letter at each place; six standard deviations of a binomial count are 82
    for (let place = 0; place < roomCodeLength; place++) {
      for (const letter of codeAlphabet) expect(Math.abs(drawn.filter(code => code[place] === letter).length - 200)).toBeLessThan(82)
    }
  })
  it('are read as people type them, and shown in groups of four', () => {
    expect(normaliseCode(' cfhj-kmnp ')).toBe('CFHJKMNP')
    expect(normaliseCode('cfhj kmnp')).toBe('CFHJKMNP')
    expect(showCode('CFHJKMNPRTWX')).toBe('CFHJ KMNP RTWX')
    expect(roomCode.parse('cfhj kmnp')).toBe('CFHJKMNP')
    for (const wrong of ['CFHJKMN', 'CFHJKMNPR', 'CFHJKMNO', '']) expect(roomCode.safeParse(wrong).success, wrong).toBe(false)
  })
  it('of a person are kept as a slow hash, the same each time', async () => {
    const { code, hash } = await newPersonalCode()
    expect(isCode(code, personalCodeLength)).toBe(true)
    expect(hash).toMatch(/^[0-9a-f]{64}$/)
    expect(await hashOfPersonalCode(code)).toBe(hash)
    expect(await hashOfPersonalCode('CFHJKMNPRTWX')).not.toBe(hash)
  })
  it('are hopeless to guess: a hundred open classes, one address that never rests, one hit in decades', () => {
    const [{ count, seconds }] = limitRules.room
    const guessesAYear = count * 365 * 86_400 / seconds
    expect(codeAlphabet.length ** roomCodeLength / (100 * guessesAYear)).toBeGreaterThan(25) // years
    const [personal] = limitRules.return
    expect(codeAlphabet.length ** personalCodeLength / (10_000 * personal.count * 365 * 86_400 / personal.seconds)).toBeGreaterThan(10_000)
  })
})

describe('a first name', () => {
  it.each([['  Mika ', 'Mika'], ['Zoë', 'Zoë'], ['Jean-Luc', 'Jean-Luc'], ['O’Neil', 'O’Neil'], ['Anna   Lena', 'Anna Lena'], ['美咲', '美咲'], ['Ngũgĩ', 'Ngũgĩ']])('%s is taken as %s', (typed, name) => {
    expect(firstName.parse(typed)).toBe(name)
  })
  it.each(['', '   ', 'mika@ropeworks.example', 'Mika 2', '12', '<b>Mika</b>', 'M'.repeat(41), '‮Mika'])('%s is none', (typed) => {
    expect(firstName.safeParse(typed).success).toBe(false)
  })
})
