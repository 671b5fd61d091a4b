import { expect, it } from 'vitest'
import { sayDuration, sayTimeLeft } from '../../../utils/time-left'

it.each([[40, '40 s'], [0.2, '1 s'], [0, '0 s'], [60, '1 min'], [61, '2 min'], [1799, '30 min'], [3600, '1 h'], [85_000, '23 h 37 min']])('says %d s as %s', (seconds, said) => {
  expect(sayTimeLeft(seconds)).toBe(said)
})
it.each([[86_400, 'a day'], [1800, '30 min'], [14_400, '4 h']])('says that something takes %d s as %s', (seconds, said) => expect(sayDuration(seconds)).toBe(said))
