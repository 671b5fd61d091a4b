import { describe, expect, it } from 'vitest'
import { hashPassword, passwordMatches } from '../../../server/services/passwords'

const msOf = async (work: () => Promise<unknown>): Promise<number> => {
  const start = performance.now()
  await work()
  return performance.now() - start
}
const median = (values: number[]) => values.sort((a, b) => a - b)[Math.floor(values.length / 2)]!

describe('a password', () => {
  it('is kept as a salted scrypt hash, never twice the same', async () => {
    const [one, two] = [await hashPassword('slow water'), await hashPassword('slow water')]
    expect(one).toMatch(/^\$scrypt\$n=32768,r=8,p=3\$/)
    expect(one).not.toBe(two)
    expect(await passwordMatches(one, 'slow water')).toBe(true)
    expect(await passwordMatches(one, 'Slow water')).toBe(false)
  })

  it('of nobody takes as long to refuse as a wrong one, so that the time tells no address', async () => {
    const hash = await hashPassword('slow water')
    await passwordMatches(undefined, 'first call')
    const [known, unknown]: [number[], number[]] = [[], []]
    for (let i = 0; i < 7; i++) {
      known.push(await msOf(() => passwordMatches(hash, 'wrong')))
      unknown.push(await msOf(() => passwordMatches(undefined, 'wrong')))
    }
    expect(median(unknown) / median(known)).toBeGreaterThan(0.5)
    expect(median(unknown) / median(known)).toBeLessThan(2)
    expect(await passwordMatches(null, '')).toBe(false)
  })
})
