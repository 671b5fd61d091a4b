import { describe, expect, it } from 'vitest'
import type { Bench } from '../../../shared/schemas/benches'
import { benchNextStep, withOneMore } from '../../../utils/bench-next-step'

const bench = (fields: Partial<Bench> = {}) => ({ starter: false, baseExposure: { value: 260, unit: 's', low: null, high: null, since: '' }, ...fields }) as Bench
const reading = (id: string) => ({ id, state: 'ready' as const })
const expectedError = { nextPrint: { median: 1, p95: 3 }, curve: { median: 0.2, p95: 0.4 } }
const curve = (version: number, state: 'draft' | 'in-use' | 'retired', ...readingIds: string[]) => ({ id: `c${version}`, version, state, readingIds, expectedError })

describe('benchNextStep', () => {
  const cases: [string, Parameters<typeof benchNextStep>, string][] = [
    ['a starter leads to a bench of one’s own', [bench({ starter: true }), [], [curve(1, 'in-use')], true], 'set-up'],
    ['the base exposure comes first', [bench({ baseExposure: null }), [], [], true], 'base-exposure'],
    ['then a wedge print is read', [bench(), [], [], true], 'read'],
    ['then a curve is fitted', [bench(), [reading('r1')], [], true], 'fit'],
    ['then it is put in use', [bench(), [reading('r1')], [curve(1, 'draft', 'r1')], true], 'use'],
    ['then a negative is made', [bench(), [reading('r1')], [curve(1, 'in-use', 'r1')], true], 'negative'],
    ['a further reading asks for a further curve', [bench(), [reading('r1'), reading('r2')], [curve(1, 'in-use', 'r1')], true], 'fit'],
    ['a draft older than the curve in use asks for nothing', [bench(), [reading('r1')], [curve(1, 'draft', 'r1'), curve(2, 'in-use', 'r1')], true], 'negative'],
    ['a retired curve leaves the bench without one', [bench(), [reading('r1')], [curve(1, 'retired', 'r1')], true], 'fit'],
    ['a member only makes negatives', [bench({ baseExposure: null }), [], [], false], 'negative'],
  ]
  it.each(cases)('%s', (_, args, action) => expect(benchNextStep(...args).action).toBe(action))
})

it('a second wedge print takes the next print’s error from √2 to √1.5 of the spread (derived)', () => {
  expect(withOneMore(3, 1)).toBeCloseTo(3 * Math.sqrt(1.5 / 2), 10)
})
