import { describe, expect, it } from 'vitest'
import { freeFirstName } from '../../../shared/classes/first-names'
import { classSteps, stepOf } from '../../../shared/classes/steps'
import { dateOf, endOfDay, stepsTaken } from '../../../utils/class-words'

describe('the step that somebody is at', () => {
  const none = { photos: 0, negatives: 0, films: 0, handedIn: 0 }
  it.each([
    [none, 'joined'],
    [{ ...none, photos: 3 }, 'photo'],
    [{ ...none, photos: 1, negatives: 1 }, 'negative'],
    [{ photos: 1, negatives: 2, films: 1, handedIn: 0 }, 'film'],
    [{ photos: 1, negatives: 1, films: 1, handedIn: 1 }, 'handed-in'],
    // handed in before any film was made, and after the photo went into the bin
    [{ photos: 0, negatives: 1, films: 0, handedIn: 1 }, 'handed-in'],
    // the film of a negative that was put away counts no more
    [{ photos: 1, negatives: 0, films: 1, handedIn: 0 }, 'photo'],
  ] as const)('follows from what there is: %o is %s', (things, step) => {
    expect(stepOf(things)).toBe(step)
  })
  it('fills a wedge of five', () => {
    expect(classSteps.map(stepsTaken)).toEqual([1, 2, 3, 4, 5])
  })
})

describe('equal first names', () => {
  it('are told apart by the first free number, whatever their capitals', () => {
    expect(freeFirstName('Mika', [])).toBe('Mika')
    expect(freeFirstName('mika', ['Mika'])).toBe('mika 2')
    expect(freeFirstName('Mika', ['Mika', 'Mika 2', 'Ada', 'MIKA 4'])).toBe('Mika 3')
  })
})

describe('the last day of a class', () => {
  it('counts to its end, here, and comes back as the same day', () => {
    const end = endOfDay('2026-06-30')!
    expect(new Date(end).getHours()).toBe(23)
    expect(dateOf(end)).toBe('2026-06-30')
    expect(endOfDay('')).toBeNull()
    expect(endOfDay('2026-13-40')).toBeNull()
  })
})
