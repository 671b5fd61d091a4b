import { describe, expect, it } from 'vitest'
import { applyHomography, fitHomography, invertHomography } from '#shared/calibration/reading/homography'
import type { Point } from '#shared/calibration/reading/picture'

const known = [3.1, -0.4, 120, 0.5, 2.8, 60, 4e-4, -7e-4, 1]
const corners: Point[] = [[0, 0], [200, 0], [200, 138], [0, 138]]

describe('a perspective map', () => {
  it('is found again from four points', () => {
    const h = fitHomography(corners, corners.map(p => applyHomography(known, p)))
    for (const point of [[17, 90], [150, 3], [100, 69]] as const) {
      const [x, y] = applyHomography(h, point)
      const [u, v] = applyHomography(known, point)
      expect(Math.hypot(x - u, y - v)).toBeLessThan(1e-5)
    }
  })

  it('takes a point back', () => {
    const back = invertHomography(known)
    const [x, y] = applyHomography(back, applyHomography(known, [33, 44]))
    expect([x, y]).toEqual([expect.closeTo(33, 8), expect.closeTo(44, 8)])
  })

  it('takes the square to the known trapezoid: (0, 0), (4, 0), (3, 2), (1, 2) send the middle to (2, 4/3), where the diagonals cross', () => {
    const h = fitHomography([[0, 0], [1, 0], [1, 1], [0, 1]], [[0, 0], [4, 0], [3, 2], [1, 2]])
    expect(applyHomography(h, [0.5, 0.5])).toEqual([expect.closeTo(2, 6), expect.closeTo(4 / 3, 6)])
  })

  it('spreads errors evenly over many points', () => {
    const grid: Point[] = Array.from({ length: 49 }, (_, i) => [i % 7 * 30, Math.floor(i / 7) * 20])
    const noisy = grid.map((p, i): Point => {
      const [x, y] = applyHomography(known, p)
      return [x + (i % 2 ? 0.5 : -0.5), y + (i % 3 - 1) * 0.5]
    })
    const h = fitHomography(grid, noisy)
    const worst = Math.max(...grid.map((p) => {
      const [x, y] = applyHomography(h, p)
      const [u, v] = applyHomography(known, p)
      return Math.hypot(x - u, y - v)
    }))
    expect(worst).toBeLessThan(0.45)
  })

  it('refuses fewer than four points', () => {
    expect(() => fitHomography(corners.slice(1), corners.slice(1))).toThrow(/four points/)
  })
})
