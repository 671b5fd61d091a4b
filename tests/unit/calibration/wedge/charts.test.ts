// Layouts have no outside source; what is checked are their promises, and that a stored plan is laid out the same for ever.
import { createHash } from 'node:crypto'
import { describe, expect, it } from 'vitest'
import { layoutWedge } from '#shared/calibration/wedge-layout'
import { chartOf } from '#shared/calibration/wedge/chart'
import { formatStripExposure, stripExposures } from '#shared/calibration/wedge/exposure-strip'
import { numberedLevels } from '#shared/calibration/wedge/numbered-page'
import type { RectMm, WedgePage } from '#shared/calibration/wedge/page'
import type { WedgePlan } from '#shared/calibration/wedge/plan'

const strip = { firstExposure: 60, unit: 's', steps: 10, stopsPerStep: 0.5 } as const
const tablet = { steps: 21, stepWidthMm: 6, stepHeightMm: 14 }
const plans = {
  scattered: { kind: 'scattered', grid: '24x16', seed: 4711 },
  numbered: { kind: 'numbered', steps: 31 },
  inkTrial: { kind: 'ink-trial', grid: '24x24', seed: 12, mixes: ['#000000', '#204060', '#802000'] },
  inkLoad: { kind: 'ink-load', grid: '24x16' },
  smallInkLoad: { kind: 'ink-load', grid: '16x12' },
  strip: { kind: 'exposure-strip', grid: '16x12', strip },
  longStrip: { kind: 'exposure-strip', grid: '24x16', strip: { ...strip, steps: 14, firstExposure: 7, stopsPerStep: 1 } },
  tablet: { kind: 'step-tablet', grid: '24x16', tablet },
} satisfies Record<string, WedgePlan>
const all = Object.entries(plans) as [keyof typeof plans, WedgePlan][]

/** Rounded to a millionth, so that the last bit of a sine does not count. */
const hashOf = (value: unknown): string =>
  createHash('sha256').update(JSON.stringify(value, (_, v: unknown) => typeof v === 'number' ? Math.round(v * 1e6) / 1e6 : v)).digest('hex').slice(0, 16)

const inside = (r: RectMm, box: RectMm): boolean => r.xMm >= box.xMm - 0.1 && r.yMm >= box.yMm - 0.1 && r.xMm + r.widthMm <= box.xMm + box.widthMm + 0.1 && r.yMm + r.heightMm <= box.yMm + box.heightMm + 0.1
const overlap = (a: RectMm, b: RectMm): boolean => {
  const slack = 1e-6
  return a.xMm + a.widthMm > b.xMm + slack && b.xMm + b.widthMm > a.xMm + slack && a.yMm + a.heightMm > b.yMm + slack && b.yMm + b.heightMm > a.yMm + slack
}
const edges = (page: WedgePage): RectMm[] => [
  ...page.patches, ...page.grounds.map(g => g.place), ...page.labels.map(l => l.place), ...page.markers.flatMap(m => [m.place, m.clear, m.fullInk]), page.identity.symbol, page.field,
]

describe('a plan', () => {
  it.each([
    ['scattered', '3f4367a39b28db35'], ['numbered', '01a0c73f86bd979c'], ['inkTrial', '4240d6119bdc288f'],
    ['inkLoad', 'e97e77f797f36a1c'], ['strip', '07ea7239988a5965'], ['tablet', '2788aa7f6fecc2cd'],
  ] as const)('(%s) is laid out as it was when it was first made', (name, hash) => {
    // The film of a stored plan must never change: hashes as they came out first.
    expect(hashOf(chartOf(plans[name], 360))).toBe(hash)
  })

  it.each(all)('(%s) has all edges on the film’s pixels', (_, plan) => {
    for (const pixelsPerInch of [300, 360, 720]) {
      for (const { xMm, yMm, widthMm, heightMm } of edges(chartOf(plan, pixelsPerInch).page)) {
        for (const mm of [xMm, yMm, xMm + widthMm, yMm + heightMm]) {
          const pixels = mm / 25.4 * pixelsPerInch
          expect(Math.abs(pixels - Math.round(pixels))).toBeLessThan(1e-6)
        }
      }
    }
  })

  it.each(all)('(%s) keeps patches, grounds and its own labels in the field, and patches apart from each other and from labels', (_, plan) => {
    const { page, patches } = chartOf(plan, 360)
    expect(patches).toHaveLength(page.patches.length)
    const ownLabels = page.labels.filter(label => !['code', 'foil', 'bench', 'print-number'].includes(label.id))
    for (const place of [...page.patches, ...page.grounds.map(g => g.place), ...ownLabels.map(l => l.place)]) expect(inside(place, page.field), JSON.stringify(place)).toBe(true)
    for (const label of ownLabels) {
      expect([...page.patches, ...page.grounds.filter(g => g.ink === 'full' && label.ink === 'full').map(g => g.place)].filter(p => overlap(p, label.place)), label.id).toEqual([])
      expect(ownLabels.filter(other => other !== label && overlap(other.place, label.place)).map(other => other.id), label.id).toEqual([])
    }
    if (page.patches.length < 100) page.patches.forEach((patch, i) => expect(page.patches.slice(i + 1).filter(p => overlap(p, patch))).toEqual([]))
    else expect(new Set(page.patches.map(p => `${p.xMm} ${p.yMm}`)).size).toBe(page.patches.length)
  })

  it.each(all)('(%s) has levels of 8-bit codes', (_, plan) => {
    for (const { level } of chartOf(plan, 360).patches) expect(level * 255).toBeCloseTo(Math.round(level * 255), 9)
  })
})

describe('a scattered wedge’s chart', () => {
  it('has its levels in the order of its patches: each where the layout puts it', () => {
    const { page, patches, readingLevels } = chartOf(plans.scattered, 254)
    const cells = layoutWedge(plans.scattered).cells
    cells.forEach(({ xMm, yMm, level }, i) => {
      expect(page.patches[i]!.xMm - page.field.xMm).toBeCloseTo(xMm, 6)
      expect(page.patches[i]!.yMm - page.field.yMm).toBeCloseTo(yMm, 6)
      expect(patches[i]).toEqual({ level })
    })
    expect(readingLevels).toEqual(cells.map(cell => cell.level))
  })

  it('holds tones when it goes through a curve, and the curve’s levels by straight lines between its points', () => {
    const curve = Array.from({ length: 1025 }, (_, i) => (i / 1024) ** 2)
    const { patches, readingLevels } = chartOf(plans.scattered, 360, curve)
    const cells = layoutWedge(plans.scattered).cells
    patches.forEach(({ level, tone }, i) => {
      expect(tone).toBe(cells[i]!.level)
      // A parabola leaves its chord by h²/8 · f'' = (1/1024)²/4 at most (derived).
      expect(Math.abs(level - tone! ** 2)).toBeLessThan(1 / 1024 ** 2 / 4 + 1e-12)
    })
    expect(readingLevels).toEqual(patches.map(patch => patch.level))
    expect(chartOf(plans.strip, 360, curve)).toEqual(chartOf(plans.strip, 360))
  })
})

it('gives a numbered wedge’s chart its levels', () => {
  expect(chartOf(plans.numbered, 360).patches.map(patch => patch.level)).toEqual(numberedLevels(31))
})

describe.each([2, 3, 4, 5, 6])('an ink trial of %d mixes', (count) => {
  const mixes = ['#000000', '#204060', '#802000', '#005010', '#303030', '#401050'].slice(0, count)
  const { page, patches, readingLevels } = chartOf({ kind: 'ink-trial', grid: '16x12', seed: 5, mixes }, 360)
  const ofMix = (mix: string) => patches.filter(patch => patch.inkColor === mix)

  it('gives every mix a whole ramp, clear to full, in its share of the cells', () => {
    for (const mix of mixes) {
      const levels = ofMix(mix).map(patch => patch.level).sort((a, b) => a - b)
      expect(Math.abs(levels.length - 192 / count)).toBeLessThanOrEqual(1)
      expect([levels[0], levels.at(-1)]).toEqual([0, 1])
      // Even shares of a cosine-warped axis lie at most (π/4 + ½)/share apart; twice that where blocks meet (derived).
      expect(Math.max(...levels.slice(1).map((l, i) => l - levels[i]!))).toBeLessThan(2 * (Math.PI / 4 + 0.5) * count / 32)
    }
    expect(readingLevels).toBeNull()
  })

  it('scatters every mix over the field', () => {
    for (const mix of mixes) {
      const places = page.patches.filter((_, i) => patches[i]!.inkColor === mix)
      const mean = (of: (p: RectMm) => number) => places.reduce((sum, p) => sum + of(p), 0) / places.length
      expect(Math.abs(mean(p => p.xMm + p.widthMm / 2) - page.field.xMm - page.field.widthMm / 2)).toBeLessThan(page.field.widthMm / 10)
      expect(Math.abs(mean(p => p.yMm + p.heightMm / 2) - page.field.yMm - page.field.heightMm / 2)).toBeLessThan(page.field.heightMm / 10)
    }
  })
})

describe('an exposure strip', () => {
  it('rises by half stops, once in each direction, to times that a clock shows', () => {
    // By hand: 60 · √2ⁿ = 60, 84.9, 120, 169.7, 240, 339.4, 480, 678.8, 960, 1357.6.
    const rising = [60, 85, 120, 170, 240, 340, 480, 680, 960, 1360]
    expect(stripExposures(strip)).toEqual([...rising, ...rising.toReversed()])
    expect(stripExposures({ ...strip, firstExposure: 0.5, steps: 5, stopsPerStep: 1 }).slice(0, 5)).toEqual([0.5, 1, 2, 4, 8])
  })

  it('rounds light units to three figures, and refuses steps that a clock can’t tell apart', () => {
    expect(stripExposures({ ...strip, unit: 'dose', firstExposure: 0.05, steps: 5 }).slice(0, 5)).toEqual([0.05, 0.0707, 0.1, 0.141, 0.2])
    expect(() => stripExposures({ ...strip, firstExposure: 0.05 })).toThrow(/too short to tell apart/)
  })

  it('prints beside each window its step and when the card covers it', () => {
    const { page } = chartOf(plans.strip, 360)
    const text = (id: string) => page.labels.find(label => label.id === id)?.text
    expect([text('step-0'), text('time-0'), text('step-10'), text('time-10'), text('step-19'), text('time-3')]).toEqual(['1', '60 s', '10', '22:40 min', '1', '2:50 min'])
    expect([formatStripExposure(119, 's'), formatStripExposure(240, 's'), formatStripExposure(12.5, 'dose')]).toEqual(['119 s', '4:00 min', '12.5'])
  })

  it('has windows of clear film between bars of full ink, upper row first', () => {
    const { page, patches } = chartOf(plans.strip, 360)
    expect(patches.every(patch => patch.level === 0)).toBe(true)
    const bars = page.grounds.map(ground => ground.place)
    for (const window of page.patches) {
      const beside = bars.filter(bar => Math.abs(bar.yMm - window.yMm) < 0.01)
      expect(beside.some(bar => Math.abs(bar.xMm + bar.widthMm - window.xMm) < 0.1)).toBe(true)
      expect(beside.some(bar => Math.abs(bar.xMm - window.xMm - window.widthMm) < 0.1)).toBe(true)
    }
    expect(page.patches[0]!.yMm).toBeLessThan(page.patches[10]!.yMm)
    expect(page.patches[0]!.xMm).toBe(page.patches[10]!.xMm)
  })
})

describe('a step tablet’s guide', () => {
  it('has a window of the tablet’s size, its steps as patches with their densities', () => {
    const { page, patches } = chartOf(plans.tablet, 360)
    const [first, last] = [page.patches[0]!, page.patches.at(-1)!]
    expect(last.xMm + last.widthMm - first.xMm).toBeCloseTo(126, 1)
    expect(first.heightMm).toBeCloseTo(14, 1)
    // By hand: 20 steps of 0.15 are 3.00.
    expect([patches[0]!.density, patches[1]!.density, patches[20]!.density]).toEqual([0, 0.15, 3])
    expect(chartOf({ ...plans.tablet, tablet: { ...tablet, steps: 5, densities: [0.05, 0.2, 0.36, 0.5, 0.66] } }, 360).patches.map(p => p.density)).toEqual([0.05, 0.2, 0.36, 0.5, 0.66])
  })

  it.each([
    ['larger than the window', { steps: 41, stepWidthMm: 20, stepHeightMm: 20 }, /820 × 20 mm is larger/],
    ['with another number of densities', { ...tablet, densities: [0, 1] }, /21 steps, but 2 densities/],
    ['with densities that fall', { steps: 5, stepWidthMm: 6, stepHeightMm: 14, densities: [0, 1, 0.9, 1.2, 1.5] }, /rise/],
  ])('refuses a tablet %s', (_, wrong, message) => {
    expect(() => chartOf({ kind: 'step-tablet', grid: '24x16', tablet: wrong }, 360)).toThrow(message)
  })
})

describe('the check of ink load', () => {
  it('has fields from full ink down and a strip to wipe at each time', () => {
    const { patches, page } = chartOf(plans.inkLoad, 360)
    expect(patches.map(patch => Math.round(patch.level * 100))).toEqual([100, 95, 90, 80, 70, 60, 100, 100, 100, 100, 100])
    const words = page.labels.map(label => label.text)
    for (const minutes of [5, 10, 20, 30, 60]) expect(words).toContain(`wipe at ${minutes} min`)
  })

  it.each([300, 360, 720])('has fine lines of exactly 1, 2, 3, 4 and 6 pixels at %d ppi, clear and inked', (pixelsPerInch) => {
    const { page } = chartOf(plans.smallInkLoad, pixelsPerInch)
    for (const side of ['clear', 'full']) {
      const widths = page.grounds.filter(g => g.ink === side && g.place.widthMm < 3).map(g => g.place.widthMm / 25.4 * pixelsPerInch)
      expect(widths.map(width => Math.round(width * 1e6) / 1e6)).toEqual([1, 2, 3, 4, 6].flatMap(width => Array(5).fill(width)))
    }
  })
})
