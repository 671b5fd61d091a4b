import { describe, expect, it } from 'vitest'
import type { Bench } from '../../../shared/schemas/benches'
import { walkSteps, type WalkStep } from '../../../shared/schemas/calibration'
import { benchNextStep } from '../../../utils/bench-next-step'

const bench = (fields: Partial<Bench> = {}) => ({ starter: false, ...fields }) as Bench
const reading = (id: string) => ({ id, state: 'ready' as const })
const expectedError = { nextPrint: { median: 1, p95: 3 }, curve: { median: 0.2, p95: 0.4 }, nextPrintWithOneMore: { median: 0.8, p95: 2.6 } }
const curve = (version: number, state: 'draft' | 'in-use' | 'retired', ...readingIds: string[]) => ({ id: `c${version}`, version, state, readingIds, expectedError })
const at = (now: WalkStep | null) => ({ now })

describe('benchNextStep', () => {
  const cases: [string, Parameters<typeof benchNextStep>, string][] = [
    ['a starter leads to a bench of one’s own', [bench({ starter: true }), at('path'), [], [curve(1, 'in-use')], true], 'set-up'],
    ['a reading in no curve is fitted', [bench(), at('curve'), [reading('r1')], [], true], 'fit'],
    ['then the draft is put in use', [bench(), at('curve'), [reading('r1')], [curve(1, 'draft', 'r1')], true], 'use'],
    ['a further reading asks for a further curve', [bench(), at('curve'), [reading('r1'), reading('r2')], [curve(1, 'in-use', 'r1')], true], 'fit'],
    ['a draft older than the curve in use asks for nothing', [bench(), at('curve'), [reading('r1')], [curve(1, 'draft', 'r1'), curve(2, 'in-use', 'r1')], true], 'negative'],
    ['a retired curve leaves the bench without one', [bench(), at('curve'), [reading('r1')], [curve(1, 'retired', 'r1')], true], 'fit'],
    ['with a curve in use a negative is made', [bench(), at('check'), [reading('r1')], [curve(1, 'in-use', 'r1')], true], 'negative'],
    ['and so it is once the walk is over', [bench(), at(null), [reading('r1')], [curve(1, 'in-use', 'r1')], true], 'negative'],
    ['a member only makes negatives', [bench(), at('path'), [], [], false], 'negative'],
  ]
  it.each(cases)('%s', (_, args, action) => expect(benchNextStep(...args).action).toBe(action))

  it('leads into the walk for every step that begins with handwork', () => {
    const led = walkSteps.filter(step => benchNextStep(bench(), at(step), [], [], true).step === step)
    expect(led).toEqual(['path', 'ink-load', 'base-exposure', 'wedge', 'expose', 'read'])
  })
})
