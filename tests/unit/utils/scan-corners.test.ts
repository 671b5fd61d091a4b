import { describe, expect, it } from 'vitest'
import { cornersProblem, cornerStep, startingCorners, withCorner, type Corner } from '../../../utils/scan-corners'

const put: Corner[] = [[100, 80], [900, 90], [890, 700], [110, 690]]

describe('corners put by hand', () => {
  it('start inside the picture, in the order of the contract', () => expect(startingCorners(800, 400)).toEqual([[100, 50], [700, 50], [700, 350], [100, 350]]))
  it('move one at a time and stay in the picture, the others as they were', () => {
    expect(withCorner(put, 1, [2000, -5], 1000, 800)).toEqual([[100, 80], [1000, 0], [890, 700], [110, 690]])
    expect(put[1]).toEqual([900, 90])
  })
  it('move by arrow keys, ten times as far with Shift; other keys pass', () => {
    expect(cornerStep('ArrowUp', false)).toEqual([0, -1])
    expect(cornerStep('ArrowRight', true)).toEqual([10, 0])
    expect(cornerStep('Tab', false)).toBeNull()
  })
  it('are fine going round either way: a mirrored picture goes the other', () => {
    expect(cornersProblem(put)).toBeNull()
    expect(cornersProblem([put[1]!, put[0]!, put[3]!, put[2]!])).toBeNull()
  })
  it('are refused when their lines cross, or on one spot', () => {
    expect(cornersProblem([put[0]!, put[2]!, put[1]!, put[3]!])).toMatch(/cross/)
    expect(cornersProblem([[0, 0], [10, 0], [10, 10], [0, 10]])).toMatch(/close together/)
  })
})
