import { describe, expect, it } from 'vitest'
import { parseDecimal } from '../../../utils/figures'

describe('figures', () => {
  it.each([['12,5', 12.5], ['.5', 0.5], ['−3', -3], ['+4', 4], ['1 000', 1000], ['7.', 7]])('reads %j', (text, value) => expect(parseDecimal(text)).toBe(value))
  it.each(['', '1.2.3', '1,234.5', 'Infinity', '0x10', '12mm'])('refuses %j', text => expect(parseDecimal(text)).toBeNull())
})
