// Prints of guides and ink trials by the project's own simulator, whose tones are known; a guide's steps stand for exposures or densities.
import { describe, expect, it, vi } from 'vitest'
import { readScan } from '#shared/calibration/reading/read-scan'
import { chartOf } from '#shared/calibration/wedge/chart'
import type { WedgePlan } from '#shared/calibration/wedge/plan'
import { flatbed, phone } from '../../../support/scan-simulator/cameras'
import { printOf, responseOf } from '../../../support/scan-simulator/scenes'
import { takePicture } from '../../../support/scan-simulator/take-picture'

vi.setConfig({ testTimeout: 120_000 })

const plans: [string, WedgePlan][] = [
  ['a numbered wedge', { kind: 'numbered', steps: 21 }],
  ['an ink trial', { kind: 'ink-trial', grid: '16x12', seed: 3, mixes: ['#000000', '#204060', '#802000'] }],
  ['an exposure strip', { kind: 'exposure-strip', grid: '24x16', strip: { firstExposure: 60, unit: 's', steps: 10, stopsPerStep: 0.5 } }],
  ['a small exposure strip', { kind: 'exposure-strip', grid: '16x12', strip: { firstExposure: 60, unit: 's', steps: 14, stopsPerStep: 0.5 } }],
  ['a step tablet', { kind: 'step-tablet', grid: '16x12', tablet: { steps: 21, stepWidthMm: 5, stepHeightMm: 12 } }],
]
const lightnessOf = responseOf(18, 94, 0.8)

describe.each(plans)('the print of %s', (_, plan) => {
  const { page, readingLevels, patches } = chartOf(plan, 360)
  /** Tones by what makes them: ink, or a step's place among the others. */
  const tones = patches.map(({ level, exposure, density }, i) =>
    Math.round(255 * (density === undefined && exposure === undefined ? level : (i < page.columns ? i : 2 * page.columns - 1 - i) / (page.columns - 1))) / 255)
  const print = printOf({ page, levels: tones }, { lightnessOf, seed: 4 })
  const options = readingLevels ? { levels: readingLevels } : {}
  const worst = (report: ReturnType<typeof readScan>): number =>
    report.found ? Math.max(...report.patches.map((patch, i) => patch ? Math.abs(patch.lightness - lightnessOf(tones[i]!)) : NaN)) : NaN

  it('is read from a skewed scan to 0.2 L* a patch, without a warning', () => {
    const report = readScan(takePicture(print, flatbed(page, { pixelsPerInch: 300, skewDegrees: 3, quarterTurns: 1, warpMm: 0.3, seed: 9 }), { blurPx: 0.6, noiseCodes: 0.7 }), [page], options)
    expect(report.warnings.map(warning => warning.code)).toEqual([])
    expect(worst(report)).toBeLessThan(0.2)
  })

  it('is found in a phone picture, every patch within 2 L*', () => {
    const camera = phone(page, { width: 3000, height: 2250, filled: 0.85, tiltXDegrees: 8, tiltYDegrees: -10, rollDegrees: 4, distortion: -0.01 })
    const report = readScan(takePicture(print, camera, { blurPx: 0.8, noiseCodes: 1.5 }), [page], { ...options, quality: 'phone' })
    expect(worst(report)).toBeLessThan(2)
  })
})
