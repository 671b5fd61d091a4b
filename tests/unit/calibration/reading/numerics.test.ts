import { describe, expect, it } from 'vitest'
import { edgePosition } from '#shared/calibration/reading/edge-position'
import { solveLeastSquares, solveLinear } from '#shared/calibration/reading/least-squares'
import type { Point } from '#shared/calibration/reading/picture'
import { thinPlate } from '#shared/calibration/reading/thin-plate'

describe('least squares', () => {
  it('fits the line through (0, 1), (1, 2), (2, 4): 5/6 + 3/2 x, by hand from the normal equations', () => {
    expect(Array.from(solveLeastSquares([[1, 0], [1, 1], [1, 2]], [1, 2, 4]))).toEqual([expect.closeTo(5 / 6, 12), expect.closeTo(1.5, 12)])
  })

  it('leaves out rows of weight 0', () => {
    expect(Array.from(solveLeastSquares([[1, 0], [1, 1], [1, 2]], [1, 2, 40], [1, 1, 0]))).toEqual([expect.closeTo(1, 12), expect.closeTo(1, 12)])
  })

  it('refuses rows that leave the answer open', () => {
    expect(() => solveLeastSquares([[1, 1], [2, 2]], [1, 2])).toThrow(/unique/)
  })

  it('solves a system whose first pivot is 0', () => {
    expect(Array.from(solveLinear(Float64Array.of(0, 2, 1, 1), Float64Array.of(4, 5)))).toEqual([3, 2])
    expect(() => solveLinear(Float64Array.of(1, 2, 2, 4), Float64Array.of(1, 2))).toThrow(/unique/)
  })
})

describe('a thin plate', () => {
  const points: Point[] = [[0, 0], [200, 0], [200, 138], [0, 138], [100, 0], [100, 138], [0, 70], [200, 70]]

  it('passes through its points', () => {
    const shifts = points.map(([x, y], i): Point => [Math.sin(x / 40) + i, Math.cos(y / 30)])
    const plate = thinPlate(points, shifts, 0)
    points.forEach((p, i) => expect(plate(p)).toEqual([expect.closeTo(shifts[i]![0], 8), expect.closeTo(shifts[i]![1], 8)]))
  })

  it('is exact for an affine field everywhere, however smooth', () => {
    const field = ([x, y]: Point): Point => [1 + 0.02 * x - 0.01 * y, 2 - 0.03 * x + 0.05 * y]
    const plate = thinPlate(points, points.map(field), 0.1)
    for (const p of [[50, 50], [170, 100], [-20, 160]] as const) expect(plate(p)).toEqual([expect.closeTo(field(p)[0], 7), expect.closeTo(field(p)[1], 7)])
  })
})

describe('an edge', () => {
  /** Logistic edge: 10 … 90 % in 2 ln 9 · s steps. */
  const edge = (at: number, s: number, low = 20, high = 200): number[] => Array.from({ length: 33 }, (_, i) => low + (high - low) / (1 + Math.exp(-(i - at) / s)))

  it.each([12.2, 16, 19.7])('at %d steps is found to a twentieth of a step, with its width', (at) => {
    const found = edgePosition(edge(at, 0.8), 10, 1)!
    expect(Math.abs(found.at - at)).toBeLessThan(0.05)
    expect(Math.abs(found.width - 2 * Math.log(9) * 0.8)).toBeLessThan(0.2)
    expect(found.rise).toBeCloseTo(180, 0)
  })

  it('of the wrong direction, or too small, is none', () => {
    expect(edgePosition(edge(16, 1), 10, -1)).toBeNull()
    expect(edgePosition(edge(16, 1, 20, 25), 10, 1)).toBeNull()
    expect(edgePosition(edge(16, 1, 200, 20), 10, -1)!.rise).toBeCloseTo(-180, 0)
  })
})
