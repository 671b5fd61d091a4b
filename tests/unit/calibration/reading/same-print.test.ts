import { describe, expect, it } from 'vitest'
import { seededRandom } from '../../../../shared/calibration/random'
import { printLikeness, samePrintFrom } from '../../../../shared/calibration/reading/same-print'
import { layoutWedge } from '../../../../shared/calibration/wedge-layout'
import { type QualityLevel, printQualities } from '../../../support/simulator/print'
import { drawSystem } from '../../../support/simulator/system'
import { printWedge } from '../../../support/simulator/wedge'

/** What a scanner adds to each patch, L*. */
const scannerNoise = 0.15

function scans(seed: number, quality: QualityLevel) {
  const random = seededRandom(seed)
  const layout = layoutWedge({ grid: '24x16', seed })
  const system = drawSystem(random)
  const prints = [0, 1].map(() => printWedge(system, layout, printQualities[quality], random))
  const scan = (print: number) => prints[print]!.map(({ level, lightness }) => ({ level, lightness: lightness + scannerNoise * random.normal() }))
  return { places: layout.cells, scan }
}

describe.each(['careful', 'typical', 'rough'] as const)('%s prints', (quality) => {
  it('are told apart, and each from another scan of itself', () => {
    for (let seed = 1; seed <= 20; seed++) {
      const { places, scan } = scans(seed, quality)
      expect(printLikeness(places, scan(0), scan(0)), `one print, seed ${seed}`).toBeGreaterThan(samePrintFrom)
      expect(printLikeness(places, scan(0), scan(1)), `two prints, seed ${seed}`).toBeLessThan(samePrintFrom)
    }
  })
})

it('patches that are missing in either scan do not count, and too few say nothing', () => {
  const { places, scan } = scans(1, 'typical')
  const first = scan(0), second = scan(0)
  const without = (from: number) => second.map((patch, i) => i < from ? patch : { ...patch, lightness: null })
  expect(printLikeness(places, first, without(250))).toBeGreaterThan(samePrintFrom)
  expect(printLikeness(places, first, without(79))).toBeNull()
})
