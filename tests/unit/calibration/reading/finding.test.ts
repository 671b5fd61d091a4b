import { describe, expect, it, vi } from 'vitest'
import { locateWedge } from '#shared/calibration/reading/locate-wedge'
import { readScan } from '#shared/calibration/reading/read-scan'
import { numberedLevels, numberedPage } from '#shared/calibration/wedge/numbered-page'
import { centreOf } from '#shared/calibration/wedge/page'
import { scatteredGrids, scatteredPage } from '#shared/calibration/wedge/scattered-page'
import { snapWedgePage } from '#shared/calibration/wedge/snap'
import { flatbed } from '../../../support/scan-simulator/cameras'
import { printOf, randomScene, responseOf } from '../../../support/scan-simulator/scenes'
import { takePicture } from '../../../support/scan-simulator/take-picture'

vi.setConfig({ testTimeout: 120_000 })

const pages = scatteredGrids.map(grid => snapWedgePage(scatteredPage(grid), 360))

// A few of the pictures that the reading bench takes by the hundred.
describe.each([['scan', 3, 0.3], ['scan', 8, 0.3], ['phone', 3, 1], ['phone', 18, 1]] as const)('a random %s (seed %d)', (kind, seed, limitPx) => {
  it(`shows its wedge, told from the other sizes, with corners to ${limitPx} pixels`, () => {
    const { page, camera, picture } = randomScene(seed, kind)
    const located = locateWedge(picture, pages)!
    expect([located.page.columns, located.page.rows]).toEqual([page.columns, page.rows])
    for (const [id, [x, y]] of located.corners.entries()) {
      const [u, v] = camera.toPicture(centreOf(page.markers[id]!.place))
      expect(Math.hypot(x - u, y - v), `corner ${id}`).toBeLessThanOrEqual(limitPx)
    }
  })
})

describe('a numbered wedge', () => {
  it('is read in its own order, twice, to 0.15 L*', () => {
    const page = snapWedgePage(numberedPage(21), 360)
    const [levels, lightnessOf] = [numberedLevels(21), responseOf(20, 93, 0.9)]
    const picture = takePicture(printOf({ page, levels }, { lightnessOf, seed: 2 }), flatbed(page, { pixelsPerInch: 200, skewDegrees: -2, quarterTurns: 2 }), { blurPx: 0.5, noiseCodes: 0.7 })
    const report = readScan(picture, [page], { levels })
    const errors = report.found ? report.patches.map((patch, i) => Math.abs(patch!.lightness - lightnessOf(levels[i]!))) : [Infinity]
    expect(errors).toHaveLength(42)
    expect(Math.max(...errors)).toBeLessThanOrEqual(0.15)
  })
})
