import { describe, expect, it } from 'vitest'
import { basisText, curveStory, errorFigure, oneMoreText, reversalText } from '../../../utils/curve-words'

const figures = (p95: number) => ({ median: p95 / 2, p95 })
const basis = { prints: 2, patchesUsed: 765, patchesDropped: 3, noise: 0.94, printSpread: 1.21, reversal: null }

describe('a curve’s worth in words', () => {
  it('is not written finer than it is known', () => {
    expect([0.312, 2.96, 14.4].map(errorFigure)).toEqual(['0.31', '3', '14'])
  })

  it('says what one more wedge print would buy', () => {
    const error = { nextPrint: figures(3), curve: figures(0.3), nextPrintWithOneMore: figures(2.6) }
    expect(oneMoreText(error)).toBe('One more wedge print would bring this to about ± 2.6 L*.')
  })

  it('says so when another wedge print would hardly help, and nothing where the fit does not tell', () => {
    expect(oneMoreText({ nextPrint: figures(1.4), curve: figures(0.2), nextPrintWithOneMore: figures(1.38) })).toContain('would hardly change this')
    expect(oneMoreText({ nextPrint: figures(3), curve: figures(0.3) })).toBeNull()
  })

  it('names prints, patches and what parts them', () => {
    expect(basisText({ basis, readingIds: ['a', 'b'] })).toBe('From two wedge prints, 765 patches; three patches lay too far from their like and were left out. A single patch scatters by 0.9 L*, print differs from print by 1.2 L*.')
    expect(basisText({ basis: { ...basis, prints: 1, patchesUsed: 383, patchesDropped: 1, printSpread: null }, readingIds: ['a'] }))
      .toBe('From one wedge print, 383 patches; one patch lay too far from its like and was left out. A single patch scatters by 0.9 L*.')
    expect(basisText({ basis: null, readingIds: ['a'] })).toBe('From one reading.')
  })

  it('names who fitted it, and when', () => {
    const fields = { createdAt: '2020-06-02T10:00:00Z', inUseSince: '2020-06-03T10:00:00Z', createdBy: 'Ines Marlow' }
    expect(curveStory({ ...fields, state: 'in-use' })).toBe('in use since 3 June 2020, fitted by Ines Marlow')
    expect(curveStory({ ...fields, state: 'draft', createdBy: null })).toBe('draft 2 June 2020')
    expect(curveStory({ ...fields, state: 'retired' })).toBe('retired; fitted 2 June 2020 by Ines Marlow')
  })

  it('says where shadows turn', () => {
    expect(reversalText({ level: 0.06, rise: 1.37, significance: 3 })).toBe('Below 6 % ink the print turns lighter again, by 1.4 L*.')
  })
})
